import 'server-only';
import type { OverTimeView } from '@/lib/domain/views';

const HEAD = [
  'reading',
  'label',
  'taken_at_utc',
  'accepted_at_utc',
  'setup',
  'medium',
  'wavelength_nm',
  'standard_uncertainty_nm',
  'moving_range_nm',
  'mean_nm',
  'lower_limit_nm',
  'upper_limit_nm',
  'range_limit_nm',
  'outside',
  'state',
  'withdrawn_because',
];

/** RFC 4180, with numbers at full precision. Withdrawn readings stand at the end, without limits. */
export function overTimeCsv(view: OverTimeView): string {
  const lines = view.points.map((point, i) => {
    const stretch = view.stretches.find(({ first, last }) => i >= first && i <= last);
    return [
      point.readingId,
      point.label,
      point.takenAt,
      point.acceptedAt,
      point.setupNumber,
      view.medium,
      point.valueNm,
      point.uNm,
      point.movingRangeNm,
      stretch?.meanNm,
      stretch?.lowerNm,
      stretch?.upperNm,
      stretch?.upperRangeNm,
      point.outside ? 'yes' : 'no',
      'accepted',
      '',
    ];
  });
  const withdrawn = view.withdrawn.map((point) => [
    point.readingId,
    point.label,
    point.takenAt,
    point.acceptedAt,
    point.setupNumber,
    view.medium,
    point.valueNm,
    point.uNm,
    ...Array<null>(6).fill(null),
    'withdrawn',
    point.reason,
  ]);
  return [HEAD, ...lines, ...withdrawn].map((line) => `${line.map(cell).join(',')}\r\n`).join('');
}

function cell(value: string | number | null | undefined): string {
  if (value === null || value === undefined) return '';
  // A text that a spreadsheet would run as a formula is made plain text.
  const text = typeof value === 'string' && /^[=+\-@\t\r]/.test(value) ? `'${value}` : String(value);
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
