import { begunMention, mentionsIn } from '@/lib/domain/comment';

const PEOPLE = [
  { id: 1, name: 'QA 1' },
  { id: 2, name: 'QA 12' },
  { id: 3, name: 'Reviewer 2' },
  { id: 4, name: 'Reviewer 2' },
];
const ids = (words: string) => mentionsIn(words, PEOPLE).map(({ id }) => id);

test.each([
  ['Look at order 5, @QA 1.', [1]],
  ['@QA 12 knows', [2]],
  ['@QA 12 and @qa 1', [1, 2]],
  ['@Reviewer 2: both of that name', [3, 4]],
  ['QA 1 is not named without the sign', []],
  ['mail@example and @nobody', []],
])('%s', (words, named) => {
  expect(ids(words)).toEqual(named);
});

test.each([
  ['see @', ''],
  ['see @Rev', 'Rev'],
  ['see @Reviewer 2', 'Reviewer 2'],
  ['name@', null],
  ['nothing', null],
  ['@QA 1\nnext line', null],
])('a name is begun in "%s": %s', (text, begun) => {
  expect(begunMention(text)).toBe(begun);
});
