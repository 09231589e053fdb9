const PARTED = /[;\t,]/;
const HEADS = /^(serial|serial number|s\/n|sn|unit)$/i;

const bare = (cell: string) =>
  cell
    .trim()
    .replace(/^"(.*)"$/, '$1')
    .trim();

/**
 * Serials out of typed, pasted or CSV text. Several lines are rows of a table whose first column counts; one line
 * is a list. Doubles and a heading are left out.
 */
export function serialsOf(text: string): string[] {
  const lines = text
    .replace(/^\uFEFF/, '')
    .split(/\r\n|\r|\n/)
    .filter((line) => line.trim() !== '');
  const cells = lines.length === 1 ? lines[0].split(PARTED) : lines.map((line) => line.split(PARTED)[0]);
  const serials = cells.map(bare).filter((cell) => cell !== '');
  if (serials.length && HEADS.test(serials[0])) serials.shift();
  return [...new Set(serials)];
}
