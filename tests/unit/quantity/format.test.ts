import {
  formatBytes,
  formatCalendarDate,
  formatConcise,
  formatEntered,
  formatIndex,
  formatDay,
  formatInstant,
  formatNumber,
  formatPercent,
  formatQuantity,
  formatSigned,
  placesFor,
  roundHalfAway,
} from '@/lib/quantity/format';

describe('numbers as text', () => {
  test('two figures of the uncertainty, the value to the same place', () => {
    expect(formatQuantity(634.8199, 0.714)).toEqual({ value: '634.82', uncertainty: '0.71' });
    expect(formatQuantity(10.05762, 0.027)).toEqual({ value: '10.058', uncertainty: '0.027' }); // JCGM 100:2008, 7.2.6
    expect(formatQuantity(634.8199, 0.0996)).toEqual({ value: '634.82', uncertainty: '0.10' });
    expect(formatQuantity(12345.6, 28.05)).toEqual({ value: '12\u2009346', uncertainty: '28' });
  });
  // JCGM 100:2008, 7.2.6: 10.47 mΩ is rounded up to 11 mΩ, 28.05 kHz down to 28 kHz.
  test('an uncertainty is rounded up where the nearest figure would flatter it', () => {
    expect(formatQuantity(10057.62, 10.47).uncertainty).toBe('11');
    expect(formatQuantity(1000, 28.05).uncertainty).toBe('28');
    expect(formatQuantity(5, 0.1047)).toEqual({ value: '5.00', uncertainty: '0.11' });
    expect(formatQuantity(5, 0.9999)).toEqual({ value: '5.0', uncertainty: '1.0' });
  });
  test('an uncertainty above a hundred has two figures as well', () => {
    expect(formatQuantity(12345, 1209)).toEqual({ value: '12\u2009300', uncertainty: '1\u2009200' });
  });
  test('as it was entered', () => {
    expect(formatEntered(0.1 + 0.2)).toBe('0.3');
    expect(formatEntered(-12345.5)).toBe('\u221212\u2009345.5');
  });
  test('an index of refraction in threes', () => {
    expect(formatIndex(1.000271373, 5e-8)).toBe('1.000\u2009271\u2009373');
    expect(formatIndex(1.000271373, null)).toBe('1.000\u2009271\u200937');
  });
  test('the concise form', () => {
    expect(formatConcise(634.8199, 0.357)).toBe('634.82(36)');
    expect(formatConcise(634.8199, 1.21)).toBe('634.8(1.2)');
    expect(formatConcise(-0.05, 0.0021)).toBe('\u22120.0500(21)');
    expect(formatConcise(12, 0)).toBe('12.00');
  });
  test('halves go away from zero', () => {
    expect(roundHalfAway(1.005, 2)).toBe('1.01');
    expect(roundHalfAway(-2.5, 0)).toBe('-3');
    expect(roundHalfAway(0.5, 0)).toBe('1');
  });
  test('a true minus, no negative zero, thin spaces', () => {
    expect(formatNumber(-1850.24, 1)).toBe('\u22121\u2009850.2');
    expect(formatNumber(-0.001, 2)).toBe('0.00');
    expect(formatSigned(0.213, 2)).toBe('+0.21');
    expect(formatSigned(-0.05, 2)).toBe('\u22120.05');
  });
  test('places of an unusable uncertainty fall back to two', () => expect(placesFor(Number.NaN)).toBe(2));
  test('per cent and bytes', () => {
    expect(formatPercent(0.042)).toBe('4.2 %');
    expect(formatPercent(0.81)).toBe('81 %');
    expect(formatBytes(2_100_000)).toBe('2.1 MB');
    expect(formatBytes(900)).toBe('1 kB');
  });
  test('times stand in the lab’s time zone', () => {
    expect(formatInstant('2026-11-12T08:42:00.000Z', 'Europe/Berlin')).toBe('12 Nov 2026, 09:42');
    expect(formatDay('2026-11-12T23:42:00.000Z', 'Europe/Berlin')).toBe('13 Nov 2026');
    expect(formatDay('2026-09-02T10:00:00.000Z', 'UTC')).toBe('2 Sep 2026');
    expect(formatCalendarDate('2027-03-01')).toBe('1 Mar 2027');
  });
});
