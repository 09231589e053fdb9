import type { Medium } from '@/lib/domain/specification';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';

const UNIT_HEARD: Record<string, string> = {
  nm: 'nanometres',
  mm: 'millimetres',
  µm: 'micrometres',
  px: 'pixels',
  'µm/px': 'micrometres per pixel',
};

export const MEDIUM_SHORT: Record<Medium, string> = { air: 'air', vacuum: 'vac' };

interface Props {
  value: number;
  expanded: number | null;
  unit?: string;
  medium?: Medium;
  size?: 'result' | 'head' | 'value' | 'cell';
  /** Decimals where no uncertainty sets them. */
  places?: number;
  /** Text before the value: a plus sign for a difference. */
  signed?: boolean;
}

/** Value and expanded uncertainty, two figures in U, read aloud as a sentence. */
export function Quantity({
  value,
  expanded,
  unit = 'nm',
  medium,
  size = 'value',
  places = 2,
  signed = false,
}: Props) {
  const text = expanded
    ? formatQuantity(value, expanded)
    : { value: formatNumber(value, places), uncertainty: '' };
  const shown = signed && value > 0 ? `+${text.value}` : text.value;
  const heard = [
    shown,
    text.uncertainty ? `plus or minus ${text.uncertainty}` : '',
    UNIT_HEARD[unit] ?? unit,
    medium ? `in ${medium}` : '',
  ];
  return (
    <span className={`qty ${size === 'value' ? '' : size}`}>
      <span className="only-heard">{heard.filter(Boolean).join(' ')}</span>
      <b aria-hidden="true">{shown}</b>
      {text.uncertainty ? (
        <>
          <span className="pm" aria-hidden="true">
            ±
          </span>
          <span className="u" aria-hidden="true">
            {text.uncertainty}
          </span>
        </>
      ) : null}
      <span className="unit" aria-hidden="true">
        {unit}
      </span>
      {medium ? (
        <span className="kind" aria-hidden="true">
          ({MEDIUM_SHORT[medium]})
        </span>
      ) : null}
    </span>
  );
}
