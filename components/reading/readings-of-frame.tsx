import Link from 'next/link';
import { READING_WORDS } from '@/lib/domain/life-cycle';
import type { ReadingBrief } from '@/lib/domain/views';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';
import { MEDIUM_SHORT } from '@/components/figures/quantity';

export function valueText(reading: Pick<ReadingBrief, 'wavelengthNm' | 'expandedNm' | 'spacing'>): string {
  const { value, unit } = reading.spacing;
  if (reading.wavelengthNm === null) return `${formatNumber(value, 3)} ${unit}`;
  if (!reading.expandedNm) return formatNumber(reading.wavelengthNm, 2);
  const text = formatQuantity(reading.wavelengthNm, reading.expandedNm);
  return `${text.value} ± ${text.uncertainty}`;
}

interface Props {
  readings: readonly ReadingBrief[];
  shownId: number | null;
  hrefOf: (reading: ReadingBrief) => string;
  frameId: number;
}

/** Every fit of this frame, newest first: none of them is ever changed. */
export function ReadingsOfFrame({ readings, shownId, hrefOf, frameId }: Props) {
  const medium = readings[0]?.medium ?? 'air';
  return (
    <div className="sec">
      <div className="cap" style={{ marginBottom: 5 }}>
        <h2>Readings of this frame</h2>
        <span>nm ({MEDIUM_SHORT[medium]})</span>
      </div>
      <div className="was">
        {readings.map((reading) => (
          <Link
            key={reading.id}
            href={hrefOf(reading)}
            aria-current={reading.id === shownId ? 'true' : undefined}
            prefetch={false}
          >
            <b>{reading.number}</b>
            <span className="truncate">
              {READING_WORDS[reading.status].toLowerCase()}, {formatNumber(reading.orderCentres, 0)} centres
              {reading.madeBy ? `, ${reading.madeBy.name}` : ''}
            </span>
            <b className="value">{valueText(reading)}</b>
          </Link>
        ))}
      </div>
      <Link
        className="link mt-1 inline-flex min-h-[44px] items-center text-small"
        href={`/frames/${frameId}/history`}
        prefetch={false}
      >
        The whole history
      </Link>
    </div>
  );
}
