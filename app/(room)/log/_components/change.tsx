/** Before and after of one change, as words and numbers; what did not change is left out. */

type Flat = [string, string][];

const plain = (value: unknown): string => {
  if (value === null || value === undefined) return 'none';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value === 'number') return String(Number(value.toPrecision(7))).replace('-', '−');
  return String(value);
};

const NAMES: Record<string, string> = {
  cxPx: 'centre x, px',
  cyPx: 'centre y, px',
  lengthPx: 'length, px',
  heightPx: 'height, px',
  angleDeg: 'tilt, degrees',
  fromMm: 'from, mm',
  toMm: 'to, mm',
  detectorMm: 'detector, mm',
  sha256: 'SHA-256',
};

/** "fromReading" or "person_id" as "from reading", "person id". */
function nameOf(key: string): string {
  if (NAMES[key]) return NAMES[key];
  return key
    .replace(/([a-z0-9])([A-Z])/g, '$1 $2')
    .replace(/_/g, ' ')
    .toLowerCase();
}

function flatten(value: unknown, prefix = ''): Flat {
  if (Array.isArray(value)) {
    const whole =
      value.length > 12
        ? `${value.slice(0, 12).map(plain).join(', ')}, and ${value.length - 12} more`
        : value.map(plain).join(', ');
    return value.every((item) => typeof item !== 'object' || item === null)
      ? [[prefix, whole || 'none']]
      : value.flatMap((item, i) => flatten(item, `${prefix} ${i + 1}`));
  }
  if (value !== null && typeof value === 'object') {
    return Object.entries(value).flatMap(([key, inner]) =>
      flatten(inner, prefix ? `${prefix}: ${nameOf(key)}` : nameOf(key)),
    );
  }
  return value === null || value === undefined ? [] : [[prefix || 'value', plain(value)]];
}

interface Props {
  before: unknown;
  after: unknown;
}

export function Change({ before, after }: Props) {
  const was = new Map(flatten(before));
  const is = new Map(flatten(after));
  const keys = [...new Set([...was.keys(), ...is.keys()])].filter((key) => was.get(key) !== is.get(key));
  if (!keys.length) return <div className="sub">no values</div>;
  const shown = keys.slice(0, 6);
  const rest = keys.slice(6);
  const line = (key: string) => (
    <div key={key} className="contents">
      <dt className="text-ink-3">{key}</dt>
      <dd className="min-w-0 break-words">
        {was.has(key) && is.has(key)
          ? `${was.get(key)} became ${is.get(key)}`
          : was.has(key)
            ? `${was.get(key)}, no longer`
            : is.get(key)}
      </dd>
    </div>
  );
  return (
    <div className="sub min-w-0">
      <dl className="grid grid-cols-[minmax(90px,auto)_minmax(0,1fr)] gap-x-3">{shown.map(line)}</dl>
      {rest.length ? (
        <details>
          <summary className="link inline-flex min-h-[44px] items-center">{rest.length} more values</summary>
          <dl className="grid grid-cols-[minmax(90px,auto)_minmax(0,1fr)] gap-x-3">{rest.map(line)}</dl>
        </details>
      ) : null}
    </div>
  );
}
