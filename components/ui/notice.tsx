import type { ReactNode } from 'react';

interface Props {
  mark?: ReactNode;
  title: ReactNode;
  children?: ReactNode;
  /** One button. */
  act?: ReactNode;
  /** A stop has the heavy border and is announced at once. */
  stop?: boolean;
  /** Announce when it appears. */
  live?: boolean;
}

export function Notice({ mark, title, children, act, stop = false, live = false }: Props) {
  return (
    <div className={stop ? 'notice stop' : 'notice'} role={live ? (stop ? 'alert' : 'status') : undefined}>
      {mark ?? <span />}
      <h2>{title}</h2>
      {children ? <p>{children}</p> : null}
      {act ? <div className="act">{act}</div> : null}
    </div>
  );
}
