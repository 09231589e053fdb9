/**
 * Refractive index of moist air and the step between a wavelength in air and in vacuum.
 *
 * Source: P. E. Ciddor, "Refractive index of air: new equations for the visible and near infrared",
 * Appl. Opt. 35, 1566 (1996); saturation pressure of water by the IAPWS form that the NIST Engineering
 * Metrology Toolbox uses, over ice below 0 °C. Stated range 300 to 1700 nm; the equation's own uncertainty is
 * about 2e-8 to 5e-8 (from memory).
 */
export interface AirState {
  temperatureC: number;
  pressurePa: number;
  /** Relative humidity, 0 to 100. */
  humidityPercent: number;
  /** Mole fraction of carbon dioxide in parts per million. */
  co2Ppm: number;
}

/** Standard uncertainties of a state of air; absent or null where none is stated. */
export interface AirStateU {
  uTemperatureC?: number | null;
  uPressurePa?: number | null;
  uHumidityPercent?: number | null;
  uCo2Ppm?: number | null;
}

/** The air meant where a wavelength "in air" names no state: 20 °C, 101 325 Pa, 50 % RH, 450 ppm. */
export const STANDARD_BENCH_AIR: AirState = {
  temperatureC: 20,
  pressurePa: 101_325,
  humidityPercent: 50,
  co2Ppm: 450,
};

const GAS_CONSTANT = 8.314472; // J/(mol K), the value of the NIST pages
const MOLAR_MASS_WATER = 0.018015; // kg/mol

/** Saturation pressure of water vapour in Pa at t °C (IAPWS; over ice below 0 °C). */
export function saturationPressurePa(temperatureC: number): number {
  const kelvin = temperatureC + 273.15;
  if (temperatureC < 0) {
    const theta = kelvin / 273.16;
    return (
      611.657 * Math.exp(-13.928169 * (1 - Math.pow(theta, -1.5)) + 34.7078238 * (1 - Math.pow(theta, -1.25)))
    );
  }
  const omega = kelvin - 2.38555575678e-1 / (kelvin - 6.50175348448e2);
  const a = omega * omega + 1.16705214528e3 * omega - 7.24213167032e5;
  const b = -1.70738469401e1 * omega * omega + 1.20208247025e4 * omega - 3.23255503223e6;
  const c = 1.49151086135e1 * omega * omega - 4.82326573616e3 * omega + 4.05113405421e5;
  const x = -b + Math.sqrt(b * b - 4 * a * c);
  return 1e6 * Math.pow((2 * c) / x, 4);
}

/** Compressibility of moist air; p in Pa, t in °C, xv the mole fraction of water vapour. */
function compressibility(pressurePa: number, temperatureC: number, xv: number): number {
  const t = temperatureC;
  const pOverT = pressurePa / (t + 273.15);
  const first =
    1.58123e-6 -
    2.9331e-8 * t +
    1.1043e-10 * t * t +
    (5.707e-6 - 2.051e-8 * t) * xv +
    (1.9898e-4 - 2.376e-6 * t) * xv * xv;
  return 1 - pOverT * first + pOverT * pOverT * (1.83e-11 - 0.765e-8 * xv * xv);
}

/**
 * Phase index n of air for a vacuum wavelength in nm (Ciddor 1996, equations 1 to 5).
 * n − 1 = (ρa/ρaxs)·raxs + (ρv/ρvs)·rvs. Throws RangeError outside 200 to 2000 nm, far from where it is stated.
 */
export function airIndex(vacuumNm: number, air: AirState = STANDARD_BENCH_AIR): number {
  if (!(vacuumNm >= 200 && vacuumNm <= 2000)) {
    throw new RangeError(`The index of air is not stated for ${vacuumNm} nm.`);
  }
  const s = 1e6 / (vacuumNm * vacuumNm); // µm⁻²
  const dryStandard = 1e-8 * (5792105 / (238.0185 - s) + 167917 / (57.362 - s));
  const dry = dryStandard * (1 + 5.34e-7 * (air.co2Ppm - 450));
  const vapour = 1.022e-8 * (295.235 + 2.6422 * s - 0.03238 * s * s + 0.004028 * s * s * s);

  const kelvin = air.temperatureC + 273.15;
  const p = air.pressurePa;
  const enhancement = 1.00062 + 3.14e-8 * p + 5.6e-7 * air.temperatureC * air.temperatureC;
  const xv = ((air.humidityPercent / 100) * enhancement * saturationPressurePa(air.temperatureC)) / p;
  const molarMassDry = 0.0289635 + 1.2011e-8 * (air.co2Ppm - 400);

  const z = compressibility(p, air.temperatureC, xv);
  const densityDry = ((1 - xv) * p * molarMassDry) / (z * GAS_CONSTANT * kelvin);
  const densityVapour = (xv * p * MOLAR_MASS_WATER) / (z * GAS_CONSTANT * kelvin);
  const zStandard = compressibility(101_325, 15, 0);
  const densityDryStandard = (101_325 * molarMassDry) / (zStandard * GAS_CONSTANT * 288.15);
  const zVapourStandard = compressibility(1333, 20, 1);
  const densityVapourStandard = (1333 * MOLAR_MASS_WATER) / (zVapourStandard * GAS_CONSTANT * 293.15);

  return 1 + (densityDry / densityDryStandard) * dry + (densityVapour / densityVapourStandard) * vapour;
}

/** Standard uncertainty of the equation itself (from memory: 2e-8 to 5e-8 over its range). */
const EQUATION_U = 5e-8;
/** Steps over which the index is straight to far below the equation's own uncertainty. */
const STEPS = { temperatureC: 0.5, pressurePa: 200, humidityPercent: 2, co2Ppm: 20 };

/**
 * Standard uncertainty of n for a state known with standard uncertainties: u² = Σ(∂n/∂x·u(x))² + u(equation)², the slopes by
 * central differences (JCGM 100:2008, 5.1.3, note 2). Null where the state names no uncertainty at all.
 */
export function airIndexU(vacuumNm: number, air: AirState & AirStateU): number | null {
  const given: [keyof typeof STEPS, number | null | undefined][] = [
    ['temperatureC', air.uTemperatureC],
    ['pressurePa', air.uPressurePa],
    ['humidityPercent', air.uHumidityPercent],
    ['co2Ppm', air.uCo2Ppm],
  ];
  if (given.every(([, u]) => u === null || u === undefined)) return null;
  const parts = given.map(([key, u]) => (u ?? 0) * airIndexSlope(vacuumNm, air, key));
  return Math.hypot(EQUATION_U, ...parts);
}

/** ∂n per °C, Pa, per cent of humidity or ppm of CO₂ at this state. */
export function airIndexSlope(vacuumNm: number, air: AirState, key: keyof typeof STEPS): number {
  const step = STEPS[key];
  const at = (by: number) => airIndex(vacuumNm, { ...air, [key]: air[key] + by });
  return (at(step) - at(-step)) / (2 * step);
}

/** Wavelength in the given air (nm) of light with this vacuum wavelength (nm): λ/n(λ). */
export function airFromVacuum(vacuumNm: number, air: AirState = STANDARD_BENCH_AIR): number {
  return vacuumNm / airIndex(vacuumNm, air);
}

/**
 * Vacuum wavelength (nm) of light with this wavelength in the given air (nm): λ·n. n is a function of the
 * vacuum wavelength, so it is solved by substitution; n varies so slowly that three rounds reach 1e-15.
 */
export function vacuumFromAir(airNm: number, air: AirState = STANDARD_BENCH_AIR): number {
  let vacuumNm = airNm * 1.00027;
  for (let round = 0; round < 4; round += 1) vacuumNm = airNm * airIndex(vacuumNm, air);
  return vacuumNm;
}
