import type { ButtonHTMLAttributes, ReactNode } from 'react';

export type ButtonKind = 'plain' | 'main' | 'quiet';

/** Class of a button, for links that lead somewhere and look like one. */
export function buttonClass(kind: ButtonKind = 'plain', big = false, more = ''): string {
  return ['button', kind === 'plain' ? '' : kind, big ? 'big' : '', more].filter(Boolean).join(' ');
}

interface Props extends ButtonHTMLAttributes<HTMLButtonElement> {
  kind?: ButtonKind;
  big?: boolean;
  /** While true the button cannot be pressed again; its word stays. */
  busy?: boolean;
  children: ReactNode;
}

export function Button({
  kind = 'plain',
  big = false,
  busy = false,
  className = '',
  disabled,
  ...rest
}: Props) {
  return (
    <button
      type="button"
      {...rest}
      disabled={disabled || busy}
      aria-busy={busy || undefined}
      className={buttonClass(kind, big, className)}
    />
  );
}
