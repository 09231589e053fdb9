import { RISKS, riskOf, type RiskFacts } from '@/lib/domain/review-queue';

const CALM: RiskFacts = {
  verdict: 'within',
  word: 'clear',
  wordText: 'Invented finding.',
  newSupplier: false,
  moved: false,
};

const cases: [Partial<RiskFacts>, string][] = [
  [{}, 'rest'],
  [{ verdict: null }, 'rest'],
  [{ newSupplier: true }, 'new-supplier'],
  [{ word: 'look', newSupplier: true }, 'look'],
  [{ moved: true, word: 'look' }, 'moved'],
  [{ verdict: 'undecided', moved: true }, 'limit'],
  [{ verdict: 'no-verdict' }, 'limit'],
  [{ verdict: 'outside', word: 'look' }, 'limit'],
  [{ verdict: 'outside', word: 'stop' }, 'stop'],
];

test.each(cases)('%j is %s', (facts, risk) => {
  const told = riskOf({ ...CALM, ...facts });
  expect(told.risk).toBe(risk);
  expect(told.because).toMatch(/\.$/);
});

test('the groups run from the gravest to the calm', () => {
  expect(RISKS[0]).toBe('stop');
  expect(RISKS.at(-1)).toBe('rest');
});
