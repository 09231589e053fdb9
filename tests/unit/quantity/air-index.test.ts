import {
  airFromVacuum,
  airIndex,
  saturationPressurePa,
  vacuumFromAir,
  type AirState,
} from '@/lib/quantity/air-index';

const base: AirState = { temperatureC: 20, pressurePa: 101_325, humidityPercent: 50, co2Ppm: 450 };

describe('index of air', () => {
  // P. E. Ciddor, Appl. Opt. 35, 1566 (1996), table 1: dry air, 450 ppm, 633 nm, (n − 1)·10⁸, read second-hand.
  test.each([
    [20, 80_000, 21458.0],
    [20, 100_000, 26824.4],
    [20, 120_000, 32191.6],
    [10, 100_000, 27774.7],
    [30, 100_000, 25937.2],
  ])('dry air at %d °C and %d Pa', (temperatureC, pressurePa, printed) => {
    const n = airIndex(633, { temperatureC, pressurePa, humidityPercent: 0, co2Ppm: 450 });
    expect(Math.abs((n - 1) * 1e8 - printed)).toBeLessThanOrEqual(0.1);
  });

  // The same paper, table 3: moist air. The row 40 °C, 80 kPa is printed 19996.5, a misprint: its own
  // difference column gives 19896.5.
  test.each([
    [20, 80_000, 75, 21394.0],
    [20, 120_000, 75, 32127.8],
    [40, 80_000, 75, 19896.5],
    [40, 120_000, 75, 29941.8],
    [50, 80_000, 100, 19058.4],
    [50, 120_000, 100, 28792.4],
  ])('moist air at %d °C, %d Pa, %d %%', (temperatureC, pressurePa, humidityPercent, printed) => {
    const n = airIndex(633, { temperatureC, pressurePa, humidityPercent, co2Ppm: 510 });
    // The table's carbon dioxide is 510 ppm; 60 ppm are worth 0.9 of the last printed unit.
    const at450 = airIndex(633, { temperatureC, pressurePa, humidityPercent, co2Ppm: 450 });
    const nearest = Math.min(Math.abs((n - 1) * 1e8 - printed), Math.abs((at450 - 1) * 1e8 - printed));
    expect(nearest).toBeLessThanOrEqual(0.1);
  });

  // NIST Engineering Metrology Toolbox (Ciddor form), values of its web page; tolerance one unit of the ninth decimal.
  const TOLERANCE = 1.01e-9;
  test.each([
    [321.456, 1.000283543, 321.364879],
    [500, 1.000273781, 499.863147],
    [600.1234, 1.000271818, 599.96032],
    [633, 1.000271373, 632.828268],
    [700, 1.000270657, 699.810591],
    [1000.987, 1.000269038, 1000.717769],
    [1500.8, 1.00026819, 1500.397608],
    [1700, 1.000268041, 1699.544453],
  ])('vacuum wavelength %d nm', (vacuumNm, n, airNm) => {
    expect(Math.abs(airIndex(vacuumNm, base) - n)).toBeLessThanOrEqual(TOLERANCE);
    expect(Math.abs(airFromVacuum(vacuumNm, base) - airNm)).toBeLessThanOrEqual(1e-6);
    expect(Math.abs(vacuumFromAir(airFromVacuum(vacuumNm, base), base) - vacuumNm)).toBeLessThan(1e-9);
  });
  test.each([
    [-20, 1.00031489],
    [0, 1.000291647],
    [26.7982, 1.000264994],
    [40.123, 1.000253031],
    [60.45, 1.000235516],
  ])('temperature %d °C', (temperatureC, n) => {
    expect(Math.abs(airIndex(633, { ...base, temperatureC }) - n)).toBeLessThanOrEqual(TOLERANCE);
  });
  test.each([
    [10_000, 1.000026385],
    [50_123, 1.000133999],
    [100_123.4, 1.000268148],
    [140_000, 1.000375169],
  ])('pressure %d Pa', (pressurePa, n) => {
    expect(Math.abs(airIndex(633, { ...base, pressurePa }) - n)).toBeLessThanOrEqual(TOLERANCE);
  });
  test.each([
    [0, 1.0002718],
    [20.123, 1.000271627],
    [40, 1.000271458],
    [50.9876, 1.000271364],
    [70, 1.000271203],
    [90.7432, 1.000271027],
    [100, 1.000270949],
  ])('humidity %d %%', (humidityPercent, n) => {
    expect(Math.abs(airIndex(633, { ...base, humidityPercent }) - n)).toBeLessThanOrEqual(TOLERANCE);
  });

  test('saturation pressure of water at 20 and 25 °C (IAPWS)', () => {
    expect(saturationPressurePa(20)).toBeCloseTo(2339.2148, 3);
    expect(saturationPressurePa(25)).toBeCloseTo(3169.7469, 3);
  });

  // BIPM mise en pratique, I2 633: 632.991 212 58 nm in vacuum; its standard-air value recomputed from Ciddor.
  test('stabilised He-Ne in standard air', () => {
    const dry15 = { temperatureC: 15, pressurePa: 101_325, humidityPercent: 0, co2Ppm: 450 };
    expect(airFromVacuum(632.99121258, dry15)).toBeCloseTo(632.81622, 4);
    expect(airFromVacuum(632.99121258, base)).toBeCloseTo(632.81948, 4);
  });

  test('a wavelength outside the equation is refused', () => {
    expect(() => airIndex(0)).toThrow(RangeError);
    expect(() => airIndex(Number.NaN)).toThrow(RangeError);
  });
});
