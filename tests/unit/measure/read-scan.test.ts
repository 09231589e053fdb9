/** Two columns as instruments and spreadsheets write them. The type of a CSV is RFC 4180's; the rest is common practice, no source. */
import { drawScan, looksLikeScan, readScan, scanWithin, textOf } from '@/lib/measure/read-scan';

const rows = Array.from({ length: 30 }, (_, i): [number, number] => [i / 4 - 3, 100.5 + i]);
const joined = (write: (x: number, y: number) => string, ending = '\n') =>
  rows.map(([x, y]) => write(x, y)).join(ending);
const comma = (v: number) => String(v).replace('.', ',');

test.each([
  ['comma', joined((x, y) => `${x},${y}`)],
  ['comma and blank', joined((x, y) => `${x}, ${y}`)],
  ['semicolon', joined((x, y) => `${x};${y}`)],
  ['tab', joined((x, y) => `${x}\t${y}`)],
  ['blanks, indented', joined((x, y) => `  ${x}   ${y}`)],
  ['semicolon with decimal comma', joined((x, y) => `${comma(x)};${comma(y)}`)],
  ['tab with decimal comma', joined((x, y) => `${comma(x)}\t${comma(y)}`)],
  ['a comma at every end', joined((x, y) => `${x},${y},`)],
  ['quoted', joined((x, y) => `"${x}","${y}"`)],
  ['exponents', joined((x, y) => `${x.toExponential(6)},${y.toExponential(6)}`)],
  ['lines of Windows, old and new', joined((x, y) => `${x},${y}`, '\r\n')],
  ['lines of one carriage return', joined((x, y) => `${x},${y}`, '\r')],
  [
    'a heading and notes',
    `# taken today\nSlide 2, run 7\nposition (mm),counts\n${joined((x, y) => `${x},${y}`)}\n# end\n`,
  ],
])('%s', (_, text) => {
  expect(looksLikeScan(text)).toBe(true);
  const scan = readScan(text);
  expect([...scan.positionMm]).toEqual(rows.map(([x]) => x));
  expect([...scan.intensity]).toEqual(rows.map(([, y]) => y));
});

test('positions in any order come out growing, repeats averaged', () => {
  const scan = readScan(`${joined((x, y) => `${x},${y}`)}\n-3,200.5\n`);
  expect(scan.positionMm.length).toBe(30);
  expect([scan.positionMm[0], scan.intensity[0], scan.repeats[0]]).toEqual([-3, 150.5, 2]);
});

test('bytes: with marks of UTF-8 and UTF-16, and those that are no text', () => {
  const plain = '1,2\n';
  const wide = (little: boolean) =>
    Uint8Array.from([
      ...(little ? [0xff, 0xfe] : [0xfe, 0xff]),
      ...[...plain].flatMap((c) => (little ? [c.charCodeAt(0), 0] : [0, c.charCodeAt(0)])),
    ]);
  expect(textOf(Uint8Array.from([0xef, 0xbb, 0xbf, ...[...plain].map((c) => c.charCodeAt(0))]))).toBe(plain);
  expect(textOf(wide(true))).toBe(plain);
  expect(textOf(wide(false))).toBe(plain);
  expect(textOf(Uint8Array.from([0x89, 0x50, 0x4e, 0x47, 0]))).toBeNull();
  expect(() => textOf(new Uint8Array(21 * 1024 * 1024))).toThrow(/larger than 20 MB/);
});

test('prose, one column and a table of words do not look like a scan', () => {
  expect(looksLikeScan('Dear lab, here is the scan.\nRegards')).toBe(false);
  expect(looksLikeScan('1\n2\n3\n4')).toBe(false);
  expect(looksLikeScan('unit,verdict\nA1,within\n')).toBe(false);
});

test('a region keeps what lies in it, ends included', () => {
  expect([
    ...scanWithin(readScan(joined((x, y) => `${x},${y}`)), { fromMm: -2.5, toMm: 4 }).positionMm,
  ]).toEqual(rows.map(([x]) => x).filter((x) => x >= -2.5 && x <= 4));
});

test('a drawing keeps the lowest and the highest of neighbours', () => {
  const many = Array.from({ length: 20_000 }, (_, i) => `${i},${i === 777 ? 9999 : 10 + (i % 3)}`).join('\n');
  const drawing = drawScan(new TextEncoder().encode(many));
  expect(drawing?.xMm.length).toBeLessThanOrEqual(1200);
  expect(Math.max(...(drawing?.light ?? []))).toBe(9999);
  expect(drawScan(new TextEncoder().encode('no scan'))).toBeNull();
});
