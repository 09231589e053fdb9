import { individualsChart } from '@/lib/statistics/individuals';

const points = (values: number[], setupId = 1) => values.map((valueNm) => ({ valueNm, setupId }));

describe('individuals and moving-range chart', () => {
  // NIST/SEMATECH e-Handbook of Statistical Methods, 6.3.2.2 (flow rates), with d₂ = 1.128 as printed there.
  test('the handbook’s example', () => {
    const chart = individualsChart(points([49.6, 47.6, 49.9, 51.3, 47.8, 51.2, 52.6, 52.4, 53.6, 52.1]));
    const [stretch] = chart.stretches;
    expect(stretch.meanNm).toBeCloseTo(50.81, 10);
    expect(stretch.meanRangeNm).toBeCloseTo(1.8778, 4);
    expect(stretch.upperNm).toBeCloseTo(55.8041, 4);
    expect(stretch.lowerNm).toBeCloseTo(45.8159, 4);
    expect(stretch.upperRangeNm).toBeCloseTo(6.1347, 4);
    expect(chart.findings).toEqual([]);
    expect(chart.movingRanges[0]).toBeNull();
  });
  test('a new setup starts new limits and has no range across the seam', () => {
    const chart = individualsChart([...points([1, 2, 1, 2], 1), ...points([11, 12, 11, 12], 2)]);
    expect(chart.stretches.map((s) => [s.first, s.last, s.meanNm])).toEqual([
      [0, 3, 1.5],
      [4, 7, 11.5],
    ]);
    expect(chart.movingRanges).toEqual([null, 1, 1, 1, null, 1, 1, 1]);
    expect(chart.findings).toEqual([]);
  });
  test('one outside is found, with its ranges', () => {
    const values: number[] = Array.from({ length: 20 }, (_, i) => (i % 2 ? 0.5 : -0.5));
    values[12] = 5;
    const chart = individualsChart(points(values));
    expect(chart.outside.filter(Boolean)).toHaveLength(1);
    expect(chart.outside[12]).toBe(true);
    const found = chart.findings.map((f) => `${f.kind} ${f.first}`).sort();
    expect(found).toEqual(['outside 12', 'range 12', 'range 13']);
  });
  test('nine on one side, not eight', () => {
    const eight = individualsChart(points([...Array<number>(8).fill(1), ...Array<number>(8).fill(-1)]));
    expect(eight.findings.filter((f) => f.kind === 'nine')).toEqual([]);
    const nine = individualsChart(points([...Array<number>(9).fill(1), ...Array<number>(9).fill(-1)]));
    expect(nine.findings.filter((f) => f.kind === 'nine')).toEqual([
      { kind: 'nine', first: 0, last: 8 },
      { kind: 'nine', first: 9, last: 17 },
    ]);
  });
  test('one point has no limits, thirty are firm', () => {
    expect(individualsChart(points([1])).stretches[0]).toMatchObject({ standing: 'none', upperNm: null });
    expect(individualsChart(points(Array.from({ length: 30 }, (_, i) => i % 3))).stretches[0].standing).toBe(
      'firm',
    );
    expect(individualsChart([]).stretches).toEqual([]);
  });
});
