/** What the log calls a change, in words; an unknown one shows its own name. */
const WORDS: Record<string, string> = {
  'bench.add': 'Bench added',
  'frame.break-off': 'Frame broke off',
  'frame.detector': 'Detector of a scan changed',
  'frame.fit': 'Frame fitted',
  'frame.refuse': 'Frame refused',
  'frame.give-up': 'Frame unreadable',
  'frame.receive': 'Frame received',
  'lot.open': 'Lot opened',
  'person.add': 'Person added',
  'person.ask-reset': 'Password link asked for',
  'person.change': 'Person changed',
  'person.reset-password': 'Password changed',
  'person.sign-out-everywhere': 'Sessions ended',
  'reading.accept': 'Reading accepted',
  'reading.refit': 'Reading fitted again',
  'reading.return': 'Reading returned',
  'reading.send': 'Reading sent to review',
  'setup.add': 'Setup put in force',
  'source.add': 'Source added',
  'bench.check': 'Bench checked with a reference',
  'bench.stop': 'Bench stopped',
  'bench.release': 'Bench released',
  'bench.rule': 'Check of a bench changed',
  'bench.conditions': 'Air of a bench entered',
  'frame.conditions': 'Air of a frame entered',
  'specification.add': 'Specification added',
  'specification.retire': 'Specification retired',
  'unit.outcome': 'Outcome set',
  'units.add': 'Units added',
};

export function actionWords(action: string): string {
  return WORDS[action] ?? action;
}
