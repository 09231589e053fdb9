/** Small line drawings of controls; each stands beside its word or has one that is heard. */
export function Chevron() {
  return (
    <svg
      width="12"
      height="8"
      viewBox="0 0 12 8"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.75"
      aria-hidden="true"
    >
      <path d="M1 1.5 6 6.5 11 1.5" />
    </svg>
  );
}

export function GogglesIcon() {
  return (
    <svg
      width="22"
      height="22"
      viewBox="0 0 22 22"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.75"
      aria-hidden="true"
    >
      <path d="M1.5 8h19v3.5c0 3-1.8 4.5-4.4 4.5-2.6 0-3.6-2.6-5.1-2.6S8.5 16 5.9 16c-2.6 0-4.4-1.5-4.4-4.5Z" />
    </svg>
  );
}

export function SheetIcon() {
  return (
    <svg
      width="22"
      height="22"
      viewBox="0 0 22 22"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.75"
      aria-hidden="true"
    >
      <path d="M4.5 2.5h8.5l4.5 4.5v12.5h-13ZM13 2.5v4.5h4.5M8 11.5h6M8 15h6" />
    </svg>
  );
}
