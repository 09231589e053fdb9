import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { ConfirmedValue, ValueKey } from '@/lib/domain/setup';
import { oddness } from '@/lib/domain/setup-plausibility';

interface Checked {
  key: ValueKey;
  value: number;
  /** The value before; null where there is none to compare with. */
  before: number | null;
  /** What the person said about it; '' for nothing. */
  reason: string;
}

/** What looks odd needs a reason, said beside its field; what does not, keeps none. */
export function requireConfirmed(values: readonly Checked[]): ConfirmedValue[] {
  const open: Record<string, string> = {};
  const confirmed = values.flatMap(({ key, value, before, reason }): ConfirmedValue[] => {
    const seen = oddness(key, value, before);
    if (!seen) return [];
    if (!reason) open[`confirmed.${key}`] = `${seen} If it is right, say why.`;
    return [{ key, seen, reason }];
  });
  const [first] = Object.values(open);
  if (first) throw new AppError('BAD_INPUT', first, open);
  return confirmed;
}
