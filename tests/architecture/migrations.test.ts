import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

const FOLDER = path.resolve(__dirname, '../../migrations');
const files = readdirSync(FOLDER).sort();

test('each migration has a number of its own, in the order they run', () => {
  const numbers = files.map((file) => Number(file.slice(0, 4)));
  expect(numbers.every((number) => Number.isInteger(number) && number > 0)).toBe(true);
  expect([...new Set(numbers)].sort((a, b) => a - b)).toEqual(numbers);
});

test.each(files)('%s can run again: it makes only what is not there', (file) => {
  const text = readFileSync(path.join(FOLDER, file), 'utf8');
  for (const statement of text.match(/CREATE\s+(TABLE|TRIGGER|OR REPLACE TRIGGER)(\s+IF NOT EXISTS)?/g) ??
    []) {
    expect(statement).toMatch(/IF NOT EXISTS|OR REPLACE/);
  }
  expect(text).not.toMatch(/^import .* from ['"](@\/)?(models|lib)/m);
});
