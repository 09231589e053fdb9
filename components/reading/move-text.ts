import type { Move } from '@/lib/domain/move';
import { formatNumber, formatSigned } from '@/lib/quantity/format';

/** "+0.12 nm, 0.3 u"; the share of u has no sign of its own, the nanometres have it. */
export function moveText(move: Move, places: number): string {
  const nm = `${formatSigned(move.nm, places)} nm`;
  if (move.inU === null) return nm;
  const inU = Math.abs(move.inU);
  return `${nm}, ${formatNumber(inU, inU < 0.095 ? 2 : 1)} u`;
}
