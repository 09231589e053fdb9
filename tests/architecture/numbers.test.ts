import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

/**
 * One number formatter: what a person reads on a screen, in a mail or in a sentence of the server goes through
 * lib/quantity/format. Other ways of writing a number are for machines (drawings, fields one types in) and listed here.
 */
const ROOT = path.resolve(__dirname, '../..');
const FOLDERS = ['app', 'components', 'lib/client', 'lib/server', 'lib/domain'];
const OTHER_WAYS = /\.(toFixed|toPrecision|toExponential|toLocaleString)\(|Intl\.NumberFormat/;
const FOR_MACHINES: Record<string, string> = {
  'app/(room)/benches/[id]/new-setup/_components/setup-text.ts': 'text of a field',
  'app/(room)/log/_components/change.tsx': 'raw content of a log row',
  'app/(room)/sources/_components/add-source.tsx': 'text of a field',
  'components/budget/what-if.tsx': 'text of a field',
  'components/figures/calliper-parts.tsx': 'drawing',
  'components/figures/geometry-drawing.tsx': 'drawing',
  'components/figures/hollow-orders.tsx': 'drawing',
  'components/figures/stage/paths.ts': 'drawing',
  'components/reading/scan-fields.tsx': 'value of a field',
  'lib/domain/same-digits.ts': 'digits of two engines against each other',
  'components/ui/number-field.tsx': 'text of a field',
};

const files = FOLDERS.flatMap((folder) =>
  readdirSync(path.join(ROOT, folder), { recursive: true, encoding: 'utf8' })
    .filter((file) => /\.tsx?$/.test(file))
    .map((file) => path.posix.join(folder, file)),
);
const others = files.filter((file) => OTHER_WAYS.test(readFileSync(path.join(ROOT, file), 'utf8')));

test('numbers that people read go through the one formatter', () => {
  expect(others.filter((file) => !(file in FOR_MACHINES))).toEqual([]);
});

test('the list names only files that need it', () => {
  expect(Object.keys(FOR_MACHINES).filter((file) => !others.includes(file))).toEqual([]);
});
