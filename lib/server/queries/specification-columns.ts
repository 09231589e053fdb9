import 'server-only';
import type {
  DecisionRule,
  Medium,
  Method,
  ReferenceTemperature,
  Specification,
} from '@/lib/domain/specification';

/** The columns of a specification under the alias `sp`. */
export const SPECIFICATION_COLUMNS = `
  sp.id AS sp_id, sp.name AS sp_name, sp.nominal_nm, sp.medium AS sp_medium, sp.lower_nm, sp.upper_nm,
  sp.decision_rule, sp.own_guard_nm, sp.ratio, sp.half_tolerance_nm, sp.at_temperature_c,
  sp.nm_per_k, sp.u_nm_per_k, sp.method, sp.retired_at`;

export interface SpecificationColumns {
  sp_id: number;
  sp_name: string;
  nominal_nm: number;
  sp_medium: Medium;
  lower_nm: number | null;
  upper_nm: number | null;
  decision_rule: DecisionRule;
  own_guard_nm: number | null;
  ratio: number;
  half_tolerance_nm: number;
  at_temperature_c: number | null;
  nm_per_k: number | null;
  u_nm_per_k: number | null;
  method: Method | null;
  retired_at: Date | null;
}

export function specificationOf(row: SpecificationColumns): Specification {
  return {
    name: row.sp_name,
    nominalNm: row.nominal_nm,
    medium: row.sp_medium,
    lowerNm: row.lower_nm,
    upperNm: row.upper_nm,
    rule: row.decision_rule,
    ownGuardNm: row.own_guard_nm,
    ratio: row.ratio,
    halfToleranceNm: row.half_tolerance_nm,
    atTemperature: temperatureOf(row),
    method: row.method,
  };
}

function temperatureOf(row: SpecificationColumns): ReferenceTemperature | null {
  const { at_temperature_c: temperatureC, nm_per_k: nmPerK, u_nm_per_k: uNmPerK } = row;
  return temperatureC === null || nmPerK === null ? null : { temperatureC, nmPerK, uNmPerK: uNmPerK ?? 0 };
}
