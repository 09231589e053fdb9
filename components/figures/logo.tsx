const FRINGE_HEIGHTS = [25, 15.5, 12, 7.5];

/** Two slits, and under them the fringes they make; the middle one is the longest. Without a label it only decorates. */
export function Logo({ label = 'Midfringe' }: { label?: string }) {
  const heard = label ? { role: 'img', 'aria-label': label } : { 'aria-hidden': true };
  return (
    <svg viewBox="0 0 48 40" {...heard}>
      <path d="M20.8 0V10.5M27.2 0V10.5" stroke="currentColor" strokeWidth="2.8" />
      {[-3, -2, -1, 0, 1, 2, 3].map((m) => {
        const width = m ? 3.3 : 3.6;
        const height = FRINGE_HEIGHTS[Math.abs(m)];
        return (
          <rect
            key={m}
            x={24 + m * 6.4 - width / 2}
            y="15"
            width={width}
            height={height}
            fill="currentColor"
          />
        );
      })}
    </svg>
  );
}
