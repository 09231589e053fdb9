import { barredFromAccepting, can, PERMISSIONS, type Action } from '@/lib/domain/permissions';
import { READING_STATES, READING_STEPS, readingMay, type ReadingStep } from '@/lib/domain/life-cycle';
import { ROLES, type Role } from '@/lib/domain/roles';

/** Written out by hand, so that a change of the table has to be made twice: t technician, r reviewer, q QA, a admin, u auditor. */
const MATRIX: Record<Action, string> = {
  'frames.see': 'trqau',
  'frames.upload': 't',
  'readings.fit': 'tr',
  'readings.send': 't',
  'readings.accept': 'r',
  'readings.return': 'r',
  'comments.add': 'trqa',
  'readings.choose': 'rq',
  'readings.withdraw': 'rq',
  'outcomes.set': 'rq',
  'lots.see': 'trqau',
  'lots.open': 'ta',
  'units.add': 'ta',
  'specifications.add': 'qa',
  'benches.see': 'trqau',
  'benches.add': 'a',
  'setups.add': 'a',
  'setups.decide': 'q',
  'plates.see': 'trqa',
  'plates.change': 'qa',
  'certificates.see': 'trqau',
  'certificates.add': 'qa',
  'sources.add': 'qa',
  'benches.release': 'q',
  'conditions.enter': 'tqa',
  'charts.see': 'trqau',
  'people.see': 'a',
  'people.change': 'a',
  'log.see': 'qau',
  'withdrawals.see': 'rqu',
};
const LETTER: Record<Role, string> = { technician: 't', reviewer: 'r', qa: 'q', admin: 'a', auditor: 'u' };

describe('permissions', () => {
  const cases = (Object.keys(PERMISSIONS) as Action[]).flatMap((action) =>
    ROLES.map((role) => [action, role] as const),
  );
  test.each(cases)('%s by %s', (action, role) => {
    expect(can({ id: 1, roles: [role] }, action)).toBe(MATRIX[action].includes(LETTER[role]));
  });
  test('nobody and an unknown action get no', () => {
    expect(can(null, 'frames.see')).toBe(false);
    expect(can({ id: 1, roles: [...ROLES] }, 'frames.delete')).toBe(false);
    expect(can({ id: 1, roles: [...ROLES] }, 'toString')).toBe(false);
    expect(can({ id: 1, roles: [] }, 'frames.see')).toBe(false);
  });
  test('whoever had a hand in a reading cannot accept it, whatever roles they hold', () => {
    const subject = { uploadedBy: 1, sentBy: 2, fittedBeforeSending: [3] };
    for (const id of [1, 2, 3])
      expect(can({ id, roles: [...ROLES] }, 'readings.accept', subject)).toBe(false);
    expect(can({ id: 4, roles: ['reviewer'] }, 'readings.accept', subject)).toBe(true);
    expect(can({ id: 4, roles: ['admin', 'qa', 'technician'] }, 'readings.accept', subject)).toBe(false);
    expect([1, 2, 3, 4].map((id) => barredFromAccepting(id, subject))).toEqual([
      'uploaded',
      'sent',
      'fitted',
      null,
    ]);
  });
});

describe('life cycle of a reading', () => {
  const ALLOWED: Record<ReadingStep, string[]> = {
    send: ['draft'],
    accept: ['review'],
    return: ['review'],
    withdraw: ['accepted'],
    replace: ['draft', 'review', 'returned'],
  };
  test.each(Object.keys(READING_STEPS) as ReadingStep[])('%s', (step) => {
    expect(READING_STATES.filter((state) => readingMay(step, state))).toEqual(ALLOWED[step]);
  });
});
