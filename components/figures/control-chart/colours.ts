import { lightLine, type Theme } from '@/lib/client/light';

/** A chart library wants colours, not names of tokens: the tokens' values of the theme. */
export interface ChartColours {
  ground: string;
  line: string;
  edge: string;
  ink: string;
  ink2: string;
  ink3: string;
  light: string;
  /** Factor on strokes, and least size of type, px. */
  stroke: number;
  axisPx: number;
  notePx: number;
}

const INKS: Record<Theme, Omit<ChartColours, 'light' | 'stroke' | 'axisPx' | 'notePx'>> = {
  dark: {
    ground: '#131210',
    line: '#38352f',
    edge: '#857e72',
    ink: '#f4f0e7',
    ink2: '#c3bcaf',
    ink3: '#9b9488',
  },
  paper: {
    ground: '#f3f0e8',
    line: '#d0c9bb',
    edge: '#7a7366',
    ink: '#1a1815',
    ink2: '#4a453d',
    ink3: '#625b50',
  },
};

export function chartColours(nm: number | null, theme: Theme, goggles: boolean): ChartColours {
  const inks = INKS[theme];
  return {
    ...inks,
    light: goggles ? inks.ink : lightLine(nm, theme, false),
    stroke: goggles ? 1.5 : 1,
    axisPx: goggles ? 16 : 13,
    notePx: goggles ? 16 : 14,
  };
}
