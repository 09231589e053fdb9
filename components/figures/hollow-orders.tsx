interface Props {
  /** Odd count of orders. */
  of?: number;
  /** Orders lit on each side of the zero order, the zero order included; 0 is none. */
  lit?: number;
  /** Refused or unreadable: the outlines stay dashed. */
  broken?: boolean;
  className?: string;
}

/** sin(t)/t squared: the heights follow a slit's envelope. */
function envelope(t: number): number {
  return Math.abs(t) < 1e-6 ? 1 : (Math.sin(t) / t) ** 2;
}

const percent = (share: number) => `${(100 * share).toFixed(3)}%`;

/** Outlines where a strip will be; progress fills them from the zero order outwards. */
export function HollowOrders({ of = 13, lit = 0, broken = false, className = '' }: Props) {
  const half = (of - 1) / 2;
  const orders = Array.from({ length: of }, (_, i) => i - half);
  return (
    <svg className={`orders ${className}`} aria-hidden="true">
      {orders.map((k) => {
        const height = 0.42 + 0.58 * envelope((Math.PI * k) / (half + 2.2));
        const on = Math.abs(k) < lit;
        return (
          <rect
            key={k}
            x={percent((k + half + 0.3) / of)}
            width={percent(0.4 / of)}
            y={percent((1 - height) / 2 + 0.01)}
            height={percent(height - 0.02)}
            fill={on ? 'var(--ink-2)' : 'none'}
            stroke={on ? 'var(--ink-2)' : 'var(--edge)'}
            strokeDasharray={broken && !on ? '2 4' : undefined}
            style={{ strokeWidth: 'calc(1px * var(--g))' }}
          />
        );
      })}
    </svg>
  );
}

/** Share of work done (0 to 1) as orders lit from the middle of `of`. */
export function litFor(share: number, of = 13): number {
  return Math.round(Math.max(0, Math.min(1, share)) * ((of + 1) / 2));
}
