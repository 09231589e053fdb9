import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

/**
 * Every wavelength that is shown, mailed or exported says air or vacuum. A number followed by "nm" in a text of a page, a mail
 * or an export names the medium right after it, unless it is no wavelength: then its line is listed here with what it is.
 */
const ROOT = path.resolve(__dirname, '../..');
const FOLDERS = ['app', 'components', 'lib/client', 'lib/server'];

/** Text that goes on after "nm" and says in which medium, or to what the number belongs. */
const SAYS = /^ (\(|in air|in vacuum|per K)/;
const NO_WAVELENGTH: [file: string, line: RegExp, what: string][] = [
  ['app/(room)/over-time/_components/benches-beside.tsx', /plus or minus/, 'difference of a bench and its U'],
  ['app/(room)/specifications/page.tsx', /spec\.ownGuardNm/, 'width of a guard band'],
  ['app/(room)/sources/page.tsx', /source\.uNm/, 'uncertainty'],
  ['components/budget/lot-risk.tsx', /risk\.(sdNm|uNm|guardNm)/, 'scatter, uncertainty, guard band'],
  ['components/figures/budget-bars.tsx', /expandedNm/, 'uncertainty'],
  ['components/figures/control-chart/figure.ts', /movingRangeNm/, 'moving range'],
  [
    'components/figures/tolerance-whisker.tsx',
    /\b(limit\(specification)/,
    'limits of a sentence that names the medium',
  ],
  ['app/(room)/benches/_components/bench-helpers.tsx', /errorNm/, 'what a formula adds'],
  ['components/reading/repeat-frames.tsx', /scatterNm/, 'scatter'],
  ['components/reading/move-text.ts', /move\.nm/, 'change of a value'],
  [
    'lib/server/commands/apply-correction.ts',
    /const nm =/,
    'two values of a line that names the medium behind them',
  ],
  ['lib/server/move-reasons.ts', /move\.nm/, 'change of a value'],
  ['components/references/check-list.tsx', /deviationText|remount/, 'deviation, scatter'],
  ['components/references/rule-form.tsx', /limitNm/, 'limit of a deviation'],
  ['lib/server/reference-checks.ts', /deviationNm/, 'deviation and its limit; the value names the medium'],
  ['components/reading/further.tsx', /narrower than/, 'width of a line'],
  ['components/reading/result.tsx', /publishedVacuumNm|guardNm/, 'difference, guard band'],
];

function sources(folder: string): string[] {
  return readdirSync(path.join(ROOT, folder), { recursive: true, encoding: 'utf8' })
    .filter((file) => /\.tsx?$/.test(file))
    .map((file) => path.posix.join(folder, file));
}

/** Places where a value stands before "nm" in a text: `}` of a template or of JSX, or a digit. */
function numbersWithNm(file: string): { line: string; rest: string }[] {
  return readFileSync(path.join(ROOT, file), 'utf8')
    .split('\n')
    .filter((line) => !/^\s*(\/?\*|\/\/)/.test(line))
    .flatMap((line) =>
      [...line.matchAll(/[}\d]\s?nm\b(?!=)/g)].map((found) => ({
        line,
        rest: line.slice(found.index + found[0].length),
      })),
    );
}

const found = FOLDERS.flatMap(sources).flatMap((file) =>
  numbersWithNm(file).map((place) => ({ file, ...place })),
);

test('there are wavelengths to look at', () => {
  expect(found.filter(({ rest }) => SAYS.test(rest)).length).toBeGreaterThan(5);
});

test('every number in nm says air or vacuum, or is listed as no wavelength', () => {
  const silent = found.filter(
    ({ file, line, rest }) =>
      !SAYS.test(rest) && !NO_WAVELENGTH.some(([name, pattern]) => name === file && pattern.test(line)),
  );
  expect(silent.map(({ file, line }) => `${file}: ${line.trim()}`)).toEqual([]);
});

test('the list names only lines that are there', () => {
  const gone = NO_WAVELENGTH.filter(
    ([name, pattern]) => !found.some(({ file, line }) => file === name && pattern.test(line)),
  );
  expect(gone.map(([name, pattern]) => `${name} ${pattern.source}`)).toEqual([]);
});

test('a component that draws a value takes the medium with it', () => {
  const drawn = FOLDERS.flatMap(sources).flatMap((file) =>
    [...readFileSync(path.join(ROOT, file), 'utf8').matchAll(/<Quantity\s([^]*?)\/>/g)].map(([, props]) => ({
      file,
      props: props.replace(/\s+/g, ' '),
    })),
  );
  expect(drawn.length).toBeGreaterThan(5);
  const silent = drawn.filter(({ props }) => !/\bmedium=/.test(props) && !/\bunit=/.test(props));
  expect(silent).toEqual([]);
});
