import { airFromVacuum } from '@/lib/quantity/air-index';
import { REFERENCE_LINES, vacuumFromKilohertz } from '@/lib/quantity/reference-lines';

const lineOf = (name: string) => {
  const line = REFERENCE_LINES.find((entry) => entry.name.startsWith(name));
  if (!line) throw new Error(`There is no line ${name}.`);
  return line;
};

// Frequencies of the BIPM's list of standard frequencies, in kHz (the first read in the mise en pratique "I2 633" of 2003, the
// others second-hand); c/f to the last printed digit of the wavelength.
test.each([
  ['He-Ne 633, I₂', 473_612_353_604, 1e-8],
  ['He-Ne 612, I₂', 489_880_354_900, 1e-8],
  ['He-Ne 543, I₂', 551_580_162_400, 1e-8],
  ['Nd:YAG doubled 532, I₂', 563_260_223_513, 2e-9],
  ['I₂ 514', 582_490_603_442, 1e-8],
  ['I₂ 531', 564_074_632_420, 1e-8],
  ['I₂ 576', 520_206_808_400, 1e-8],
  ['I₂ 640', 468_218_332_400, 1e-8],
  ['Rb-87 D2', 384_230_484_468.5, 1e-8],
  ['Rb-85 D2', 384_230_406_373, 1e-8],
  ['Cs D2', 351_725_718_500, 1e-7],
])('%s is c/f', (name, kHz, tolerance) => {
  expect(Math.abs(lineOf(name).vacuumNm - vacuumFromKilohertz(kHz))).toBeLessThanOrEqual(tolerance);
});

// CIPM 2007, Recommendation 2: 473.6127 THz and 632.9908 nm, each rounded by itself.
test('the free-running He-Ne agrees with its own frequency to the printed digits', () => {
  expect(Math.abs(lineOf('He-Ne 633, free').vacuumNm - vacuumFromKilohertz(473_612_700_000))).toBeLessThan(
    1e-4,
  );
  expect(lineOf('He-Ne 633, free').uNm).toBeCloseTo(0.00095, 5);
});

// NIST ASD, air wavelengths as printed (standard air: 15 °C, 101 325 Pa, dry); read second-hand. Its own air conversion is
// another equation: below 3e-5 nm here. Ne lines: half a unit of the last printed digit more.
const DRY_15 = { temperatureC: 15, pressurePa: 101_325, humidityPercent: 0, co2Ppm: 450 };
test.each([
  ['Hg 405', 404.6565],
  ['Hg 436', 435.8335],
  ['Hg 546', 546.075],
  ['Hg 577', 576.961],
  ['Hg 579', 579.067],
  ['Cd 644', 643.8469],
  ['Na D2', 588.995095],
  ['Na D1', 589.592424],
  ['He-Ne 543 green', 543.36513],
  ['He-Ne 594 yellow', 593.93154],
  ['He-Ne 612 orange', 611.80187],
])('%s in standard air', (name, airNm) => {
  expect(Math.abs(airFromVacuum(lineOf(name).vacuumNm, DRY_15) - airNm)).toBeLessThan(8e-5);
});

test('every line says what it is and where it stands', () => {
  for (const line of REFERENCE_LINES) {
    expect(line.source).not.toBe('');
    expect(line.uNm).toBeGreaterThan(0);
    expect(line.uNm).toBeLessThan(line.isReference ? 0.0011 : 1);
  }
  expect(new Set(REFERENCE_LINES.map(({ name }) => name)).size).toBe(REFERENCE_LINES.length);
});
