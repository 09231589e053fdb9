import { benchRuleSchema, releaseBenchSchema, standingAfter } from '@/lib/domain/references';

const check = (inside: boolean, setupId = 1) => ({ inside, setupId });

test.each([
  ['nothing', [], 'unchecked'],
  ['one inside', [check(true)], 'agrees'],
  ['one outside', [check(true), check(false)], 'repeat'],
  ['two outside in a row', [check(true), check(false), check(false)], 'stop'],
  ['the repeat inside', [check(false), check(true)], 'agrees'],
  ['outside, inside, outside', [check(false), check(true), check(false)], 'repeat'],
  ['outside once under each of two setups', [check(false, 1), check(false, 2)], 'repeat'],
  ['outside twice under the newer of two setups', [check(true, 1), check(false, 2), check(false, 2)], 'stop'],
])('%s', (_what, checks, standing) => {
  expect(standingAfter(checks)).toBe(standing);
});

test('a release needs a reason, a rule a reason and a limit that is one', () => {
  expect(releaseBenchSchema.safeParse({ stopId: 1, reason: '  ' }).success).toBe(false);
  const rule = { benchId: 1, method: 'absolute', why: 'x' };
  expect(benchRuleSchema.safeParse(rule).success).toBe(true);
  expect(benchRuleSchema.safeParse({ ...rule, limitNm: 0 }).success).toBe(false);
  expect(benchRuleSchema.safeParse({ ...rule, method: 'guess' }).success).toBe(false);
});
