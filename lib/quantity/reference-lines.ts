/**
 * Published wavelengths a bench may be checked with. Every entry says of what kind it is, in which medium its source prints
 * it, how well it is known and where it stands. All are kept in vacuum here.
 */
export type LineKind = 'stabilised-laser' | 'free-running-laser' | 'lamp-line' | 'atomic-line';

export const LINE_KINDS: Record<LineKind, string> = {
  'stabilised-laser': 'stabilised laser',
  'free-running-laser': 'free-running laser',
  'lamp-line': 'lamp line',
  'atomic-line': 'laser locked to an atomic line',
};

export interface ReferenceLine {
  name: string;
  kind: LineKind;
  vacuumNm: number;
  /** Standard uncertainty of the published value, nm. */
  uNm: number;
  /** The medium the source prints. */
  printedIn: 'air' | 'vacuum';
  /** Good enough to check a bench with. */
  isReference: boolean;
  source: string;
  note: string;
}

export const SPEED_OF_LIGHT = 299_792_458;

/** c/f in nm, f in kHz. */
export function vacuumFromKilohertz(kHz: number): number {
  return (SPEED_OF_LIGHT / kHz) * 1e6;
}

const MEP = 'BIPM, recommended values of standard frequencies';
const CERTIFIED = 'Only with the certificate of the stabilised laser in use.';
const ASD = 'NIST Atomic Spectra Database';
const PENCIL = 'A pencil lamp reads about 0.0007 nm longer than a low-pressure lamp.';
const STECK = 'D. A. Steck, Alkali D Line Data';
const LOCKED = 'Only while the laser is locked to the line.';

function iodine(name: string, vacuumNm: number, relative: number): ReferenceLine {
  return {
    name,
    kind: 'stabilised-laser',
    vacuumNm,
    uNm: vacuumNm * relative,
    printedIn: 'vacuum',
    isReference: true,
    source: MEP,
    note: CERTIFIED,
  };
}

function lamp(name: string, vacuumNm: number, uNm: number, note: string): ReferenceLine {
  return {
    name,
    kind: 'lamp-line',
    vacuumNm,
    uNm,
    printedIn: 'vacuum',
    isReference: true,
    source: ASD,
    note,
  };
}

function atomic(name: string, vacuumNm: number, uNm: number): ReferenceLine {
  return {
    name,
    kind: 'atomic-line',
    vacuumNm,
    uNm,
    printedIn: 'vacuum',
    isReference: true,
    source: STECK,
    note: LOCKED,
  };
}

/** Lines of the neon lamp stand for the He-Ne laser of that colour to a few ten-thousandths of a nm: isotope, gain centre. */
function heNe(name: string, vacuumNm: number, airNm: string): ReferenceLine {
  return {
    name,
    kind: 'free-running-laser',
    vacuumNm,
    uNm: 0.001,
    printedIn: 'air',
    isReference: true,
    source: `${ASD}, Ne I ${airNm} nm in air`,
    note: 'The lamp’s line; the laser lies within 0.001 nm of it.',
  };
}

export const REFERENCE_LINES: readonly ReferenceLine[] = [
  {
    name: 'He-Ne 633, free-running',
    kind: 'free-running-laser',
    vacuumNm: 632.9908,
    uNm: 632.9908 * 1.5e-6,
    printedIn: 'vacuum',
    isReference: true,
    source: 'CIPM 2007, Recommendation 2',
    note: 'Any red He-Ne laser, without a certificate.',
  },
  heNe('He-Ne 543 green, free-running', 543.51617, '543.36513'),
  heNe('He-Ne 594 yellow, free-running', 594.0961, '593.93154'),
  heNe('He-Ne 612 orange, free-running', 611.97122, '611.80187'),
  iodine('He-Ne 633, I₂ R(127) 11-5 a16', 632.99121258, 2.1e-11),
  iodine('He-Ne 612, I₂ R(47) 9-2 a7', 611.970770008, 3e-10),
  iodine('He-Ne 543, I₂ R(106) 28-0 b10', 543.515663608, 4.5e-11),
  iodine('Nd:YAG doubled 532, I₂ R(56) 32-0 a10', 532.245036104, 8.9e-12),
  iodine('I₂ 514, P(13) 43-0 a3', 514.673466368, 8.6e-12),
  iodine('I₂ 531, R(36) 32-0 a1', 531.476582653, 1e-10),
  iodine('I₂ 576, P(62) 17-1 a1', 576.29476039, 4e-10),
  iodine('I₂ 640, P(10) 8-5 a9', 640.283468747, 4.5e-10),
  lamp('Hg 405 (h)', 404.7708, 0.001, PENCIL),
  lamp('Hg 436 (g)', 435.956, 0.001, PENCIL),
  lamp('Hg 546 (e)', 546.2268, 0.001, PENCIL),
  lamp('Hg 577', 577.121, 0.001, PENCIL),
  lamp('Hg 579', 579.2276, 0.001, PENCIL),
  lamp('Cd 468', 467.94587, 0.001, ''),
  lamp('Cd 480 (F′)', 480.1254, 0.001, ''),
  lamp('Cd 509', 508.72393, 0.001, ''),
  lamp('Cd 644 (C′)', 644.0249, 0.001, ''),
  lamp('Na D1', 589.7558147, 0.0005, 'Without a filter the lamp gives D1 and D2 together.'),
  lamp('Na D2', 589.1583264, 0.0005, 'Without a filter the lamp gives D1 and D2 together.'),
  atomic('Rb-87 D2', 780.241209686, 1.3e-8),
  atomic('Rb-85 D2', 780.241368271, 2.7e-8),
  atomic('Rb-87 D1', 794.978851156, 1e-6),
  atomic('Cs D2', 852.34727582, 2.7e-7),
  atomic('Cs D1', 894.59295986, 1e-6),
  {
    name: 'Nd:YAG doubled 532, free-running',
    kind: 'free-running-laser',
    vacuumNm: 532.2,
    uNm: 0.3 / Math.sqrt(3),
    printedIn: 'vacuum',
    isReference: false,
    source: 'common practice, no source',
    note: 'Within ± 0.3 nm, rectangular: too little for a check.',
  },
];
