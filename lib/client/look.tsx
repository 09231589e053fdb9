'use client';

import {
  createContext,
  useCallback,
  useContext,
  useEffect,
  useMemo,
  useState,
  useSyncExternalStore,
  type ReactNode,
} from 'react';
import type { Theme } from './light';
import { LOOK_COOKIE, ZONE_COOKIE } from './look-cookie';

export interface Look {
  theme: Theme;
  goggles: boolean;
  /** IANA name of the zone times are shown in. */
  timeZone: string;
  setTheme: (theme: Theme) => void;
  setGoggles: (on: boolean) => void;
}

const LookContext = createContext<Look>({
  theme: 'dark',
  goggles: false,
  timeZone: 'UTC',
  setTheme: () => undefined,
  setGoggles: () => undefined,
});

const YEAR_SECONDS = 31_536_000;

function keep(name: string, value: string) {
  document.cookie = `${name}=${encodeURIComponent(value)}; path=/; max-age=${YEAR_SECONDS}; samesite=lax`;
}

const neverChanges = () => () => undefined;

function ownZone(): string {
  return Intl.DateTimeFormat().resolvedOptions().timeZone || 'UTC';
}

interface Props {
  theme: Theme;
  goggles: boolean;
  timeZone: string;
  children: ReactNode;
}

/** Theme, Goggles and time zone. Starts from the cookie the server has drawn the page with, so nothing flashes. */
export function LookProvider({ theme: theme0, goggles: goggles0, timeZone: zone0, children }: Props) {
  const [theme, setThemeState] = useState(theme0);
  const [goggles, setGogglesState] = useState(goggles0);
  // The browser's own zone, once it runs; the first paint is the server's, which knows it from the cookie.
  const timeZone = useSyncExternalStore(neverChanges, ownZone, () => zone0);

  useEffect(() => {
    if (timeZone !== zone0) keep(ZONE_COOKIE, timeZone);
  }, [timeZone, zone0]);

  const apply = useCallback((nextTheme: Theme, nextGoggles: boolean) => {
    const root = document.documentElement;
    root.dataset.theme = nextTheme;
    root.dataset.light = nextGoggles ? 'neutral' : 'colour';
    keep(LOOK_COOKIE, `${nextTheme}.${nextGoggles ? 'neutral' : 'colour'}`);
  }, []);

  const value = useMemo<Look>(
    () => ({
      theme,
      goggles,
      timeZone,
      setTheme: (next) => {
        setThemeState(next);
        apply(next, goggles);
      },
      setGoggles: (on) => {
        setGogglesState(on);
        apply(theme, on);
      },
    }),
    [theme, goggles, timeZone, apply],
  );
  return <LookContext.Provider value={value}>{children}</LookContext.Provider>;
}

export function useLook(): Look {
  return useContext(LookContext);
}
