import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

const FOLDER = path.resolve(__dirname, '../../migrations');
const files = readdirSync(FOLDER).sort();

test('migrations are numbered without gaps', () => {
  expect(files.map((file) => Number(file.slice(0, 4)))).toEqual(files.map((_, i) => i + 1));
});

test.each(files)('%s can run again: it makes only what is not there', (file) => {
  const text = readFileSync(path.join(FOLDER, file), 'utf8');
  for (const statement of text.match(/CREATE\s+(TABLE|TRIGGER|OR REPLACE TRIGGER)(\s+IF NOT EXISTS)?/g) ??
    []) {
    expect(statement).toMatch(/IF NOT EXISTS|OR REPLACE/);
  }
  expect(text).not.toMatch(/^import .* from ['"](@\/)?(models|lib)/m);
});
