import type { BudgetRow, Finding, SetupValues } from '@/lib/domain/reading-result';
import type { FitResult } from '@/lib/domain/scan-result';
import { spacingOf } from '@/lib/domain/placed-strip';
import type { Judgement, Medium, Method, OtherValue, Specification } from '@/lib/domain/specification';
import type { FitPreview } from '@/lib/domain/views';
import { airFromVacuum, airIndex, airIndexU, STANDARD_BENCH_AIR } from './air-index';
import { combineBudget, type BudgetInput } from './budget';
import { compareWith, type ComparisonFacts } from './comparison';
import { formatEntered } from './format';
import { uOfHalfWidth } from './monte-carlo';
import { judge } from './verdict';

/** What a value is judged by, and the bench it was measured on. */
export interface JudgedBy {
  setup: SetupValues;
  specification: Specification | null;
  /** What the reading may be compared with; absent or null: the bench's constants alone. */
  comparison?: ComparisonFacts | null;
}

/** A value in one medium at one temperature with its budget. */
interface Value {
  valueNm: number;
  uNm: number | null;
  expandedNm: number | null;
  k: number | null;
  dof: number | null;
  /** Every row, in nm of the medium; empty where no uncertainty can be stated. */
  budget: BudgetRow[];
}

/** A reading's value as its specification asks for it, with the whole budget and the verdict there. */
export interface ValueIn extends Omit<Value, 'valueNm'> {
  medium: Medium;
  valueNm: number | null;
  method: Method;
  /** The same by the other method, where there is one. */
  other: OtherValue | null;
  /** What was done to the value beside the change of medium, in sentences. */
  corrections: string[];
  judgement: Judgement | null;
}

/** Slope of a camera's and a lamp's spectral response where the bench states none: 0.5 % of the light per nm (simulation). */
const RESPONSE_PER_NM = 0.005;
/** Full width at half maximum over the standard deviation of a Gaussian line. */
const FWHM_OVER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);

/**
 * The value in the specification's medium (air without one), at its reference temperature, with the rows that only this
 * adds: index of air, spectral response for a broad line, tone curve and background of this frame, temperature of the unit.
 *
 * λ in air is for air of the standard state, λ_std = λ_bench·n(bench)/n(standard); in vacuum λ·n(bench). At the reference
 * temperature λ₀ = λ + κ(T₀ − T). A source has no specification and gets no verdict.
 */
export function valueIn(result: FitResult, by: JudgedBy): ValueIn {
  const { setup, specification, comparison } = by;
  const medium = specification?.medium ?? 'air';
  const heat = temperatureStep(setup, specification);
  const absolute = absoluteValue(result, medium, setup, heat);
  const compared = comparison ? comparedValue(result, medium, setup, heat, comparison) : null;
  const byComparison = comparison?.method === 'comparison' && compared !== null;
  const chosen = byComparison ? compared : absolute;
  const method: Method = byComparison ? 'comparison' : 'absolute';
  if (chosen === null) {
    const nothing = { valueNm: null, uNm: null, expandedNm: null, k: null, dof: null, budget: [] };
    return { medium, ...nothing, method, other: null, corrections: [], judgement: null };
  }
  const { valueNm, uNm, expandedNm, dof } = chosen;
  const judged =
    specification && uNm !== null && expandedNm !== null
      ? judge(valueNm, uNm, dof, expandedNm, specification)
      : null;
  // At another temperature than the limits' own a value decides nothing, inside or outside.
  const judgement: Judgement | null =
    judged && heat?.missing ? { ...judged, verdict: 'no-verdict', because: heat.missing } : judged;
  const corrections = [heat?.words ?? '', comparison ? methodWords(comparison, compared !== null) : ''];
  return {
    medium,
    ...chosen,
    method,
    other: otherOf(byComparison ? absolute : compared, byComparison ? 'absolute' : 'comparison'),
    corrections: corrections.filter(Boolean),
    judgement,
  };
}

/** From the bench's constants. */
function absoluteValue(
  result: FitResult,
  medium: Medium,
  setup: SetupValues,
  heat: TemperatureStep | null,
): Value | null {
  const index = indexFor(result, medium, setup);
  if (result.wavelengthNm === null || index === null) return null;
  const valueNm = result.wavelengthNm * index + (heat?.stepNm ?? 0);
  const none: Value = { valueNm, uNm: null, expandedNm: null, k: null, dof: null, budget: [] };
  if (result.uWavelengthNm === null || result.expandedNm === null) return none;
  // An answer that came without its rows keeps the uncertainty it came with.
  if (!result.budget.length)
    return {
      ...none,
      uNm: result.uWavelengthNm * index,
      expandedNm: result.expandedNm * index,
      k: result.k,
      dof: result.dofWavelength,
    };
  return withRows(valueNm, [
    ...result.budget.map((row) => ({ ...row, sensitivity: row.sensitivity * index })),
    ...airRow(valueNm, setup),
    ...frameRows(result.findings),
    ...responseRow(result),
    ...(heat?.rows ?? []),
  ]);
}

/** Beside the references of the same setup: the index of air cancels as well. */
function comparedValue(
  result: FitResult,
  medium: Medium,
  setup: SetupValues,
  heat: TemperatureStep | null,
  facts: ComparisonFacts,
): Value | null {
  const { value: spacing, u: uSpacing, unit } = spacingOf(result);
  const known = result.budget.find(({ key }) => key === 'fit')?.known ?? 'type A';
  const own = { spacing, uSpacing, dof: result.dofSpacing, known, unit };
  const compared = compareWith(own, facts, setup);
  if (compared === null) return null;
  const inMedium = medium === 'vacuum' ? compared.vacuumNm : airFromVacuum(compared.vacuumNm);
  const index = inMedium / compared.airNm;
  return withRows(inMedium + (heat?.stepNm ?? 0), [
    ...compared.rows.map((row) => ({ ...row, sensitivity: row.sensitivity * index })),
    ...frameRows(result.findings),
    ...responseRow(result),
    ...(heat?.rows ?? []),
  ]);
}

function withRows(valueNm: number, rows: readonly BudgetInput[]): Value {
  const { rows: budget, ...combined } = combineBudget(rows);
  return { valueNm, ...combined, budget };
}

function otherOf(value: Value | null, method: Method): OtherValue | null {
  return value && { method, valueNm: value.valueNm, expandedNm: value.expandedNm, k: value.k };
}

/** How a comparison was made, or why it was not where it was asked for. */
function methodWords({ method, references }: ComparisonFacts, made: boolean): string {
  if (method !== 'comparison') return '';
  if (made) {
    const names = [...new Set(references.map(({ source }) => source))].join(' and ');
    return `Compared with ${names}, ${references.length === 2 ? 'before and after' : 'one reading'}.`;
  }
  return references.length === 0
    ? 'No accepted reference reading of this setup yet, so the bench’s constants were used.'
    : 'Nothing says how well mounting again repeats on this bench, so its constants were used.';
}

/** n(bench)/n(standard) for air, n(bench) for vacuum; null where the index of air is not stated for this light. */
function indexFor(result: FitResult, medium: Medium, setup: SetupValues): number | null {
  const { wavelengthNm, wavelengthVacuumNm } = result;
  if (wavelengthNm === null) return null;
  if (medium === 'vacuum') return wavelengthVacuumNm === null ? null : wavelengthVacuumNm / wavelengthNm;
  if (!setup.air || wavelengthVacuumNm === null) return 1;
  return wavelengthVacuumNm / wavelengthNm / airIndex(wavelengthVacuumNm, STANDARD_BENCH_AIR);
}

function row(part: Pick<BudgetInput, 'key' | 'name' | 'known'> & Partial<BudgetInput>): BudgetInput {
  return { symbol: '', value: null, unit: 'nm', u: 0, dof: null, sensitivity: 1, ...part };
}

/** Index of the bench's air, where its state was measured with uncertainties. */
function airRow(valueNm: number, { air }: SetupValues): BudgetInput[] {
  if (!air) return [];
  const u = airIndexU(valueNm, air);
  if (u === null) return [];
  return [
    row({
      key: 'air-index',
      name: 'Index of air',
      symbol: 'n',
      value: airIndex(valueNm, air),
      unit: '',
      u,
      known: 'temperature, pressure, humidity, CO₂ as measured',
      sensitivity: valueNm,
    }),
  ];
}

const FRAME_ROWS = [
  ['tone', 'Tone curve', 'rectangular, half of what the curve moved'],
  ['background', 'Background shape', 'rectangular, half of what bending it moved'],
] as const;

/**
 * Where a tone curve or a bent background was fitted, half of what that moved the wavelength counts as a half width: the
 * curve's form is assumed. The checks give one move for all that was fitted together, so it is shared among the rows.
 */
function frameRows(findings: readonly Finding[]): BudgetInput[] {
  const sizeOf = (check: string) => findings.find((finding) => finding.check === check)?.sizeNm ?? 0;
  const fitted = FRAME_ROWS.filter(([check]) => sizeOf(check) > 0);
  return fitted.map(([check, name, known]) =>
    row({
      key: check === 'tone' ? 'tone-curve' : 'background-shape',
      name,
      known,
      u: uOfHalfWidth(sizeOf(check) / 2 / Math.sqrt(fitted.length), 'rectangular'),
      shape: 'rectangular',
    }),
  );
}

/** A line of width σ seen by a response of slope s has its mean moved by s·σ²: a half width for a broad line. */
function responseRow({ bandwidth }: FitResult): BudgetInput[] {
  if (!bandwidth || bandwidth.fwhmNm === null) return [];
  const sigma = bandwidth.fwhmNm / FWHM_OVER_SIGMA;
  return [
    row({
      key: 'response',
      name: 'Spectral response',
      known: 'rectangular, slope within 0.5 % per nm over the line’s width',
      u: uOfHalfWidth(RESPONSE_PER_NM * sigma * sigma, 'rectangular'),
      shape: 'rectangular',
    }),
  ];
}

interface TemperatureStep {
  stepNm: number;
  words: string;
  rows: BudgetInput[];
  /** Why the value cannot be compared with the limits; null when it can. */
  missing: string | null;
}

/** From the unit's temperature to the one the limits hold at; null where the specification names none. */
function temperatureStep(
  { sourceTemperature: now }: SetupValues,
  specification: Specification | null,
): TemperatureStep | null {
  const at = specification?.atTemperature;
  if (!at) return null;
  if (!now) {
    const missing = `The limits hold at ${formatEntered(at.temperatureC)} °C, and the temperature of the unit was not entered.`;
    return { stepNm: 0, words: '', rows: [], missing };
  }
  const kelvin = at.temperatureC - now.value;
  const stepNm = at.nmPerK * kelvin;
  const rows = [
    row({
      key: 'unit-temperature',
      name: 'Unit temperature',
      symbol: 'T',
      value: now.value,
      unit: '°C',
      u: now.u ?? 0,
      known: now.known ?? 'as entered',
      dof: now.dof ?? null,
      sensitivity: -at.nmPerK,
      ...(now.shape ? { shape: now.shape } : {}),
    }),
  ];
  if (stepNm !== 0 && at.uNmPerK > 0)
    rows.push(
      row({
        key: 'temperature-coefficient',
        name: 'nm per K',
        value: at.nmPerK,
        unit: 'nm/K',
        u: at.uNmPerK,
        known: 'from the specification',
        sensitivity: kelvin,
      }),
    );
  const words =
    stepNm === 0
      ? `The unit was at ${formatEntered(at.temperatureC)} °C, where the limits hold.`
      : `Carried from ${formatEntered(now.value)} °C to ${formatEntered(at.temperatureC)} °C, where the limits hold.`;
  return { stepNm, words, rows, missing: null };
}

/** A fit as it is shown before it is kept. */
export function previewOf(result: FitResult, by: JudgedBy): FitPreview {
  const { valueNm, ...value } = valueIn(result, by);
  return { result, wavelengthNm: valueNm, ...value };
}
