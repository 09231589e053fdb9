'use client';

import { useCallback, useState } from 'react';

export interface Size {
  width: number;
  height: number;
}

/** Size of an element as it changes; null until it is on the screen. */
export function useSize<T extends HTMLElement>(): [(element: T | null) => void | (() => void), Size | null] {
  const [size, setSize] = useState<Size | null>(null);
  const ref = useCallback((element: T | null) => {
    if (!element) return undefined;
    const observer = new ResizeObserver(() => {
      const next = { width: element.clientWidth, height: element.clientHeight };
      setSize((before) =>
        before && before.width === next.width && before.height === next.height ? before : next,
      );
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [ref, size];
}
