/** How far a person's change has moved a value. */

/** A move beyond this share of u needs a reason: common practice, no source. */
export const MOVE_NEEDS_REASON_U = 0.3;

export interface Move {
  nm: number;
  /** In standard uncertainties of the first fit; null where it states none. */
  inU: number | null;
}

/** The value a frame's first fit gave, in the medium it is judged in. */
export interface FirstValue {
  valueNm: number;
  uNm: number | null;
}

/**
 * Difference of a value (nm) from the first fit of its frame, in nm and in that fit's standard uncertainties. Steps
 * taken one after the other add up, because the first fit stays the mark. Null where either gave no value.
 */
export function moveFrom(first: FirstValue | null, valueNm: number | null): Move | null {
  if (!first || valueNm === null) return null;
  const nm = valueNm - first.valueNm;
  return { nm, inU: first.uNm !== null && first.uNm > 0 ? nm / first.uNm : null };
}

/** Must the move have a reason before the reading can be accepted? Without a u every move must. */
export function moveNeedsReason(move: Move | null): boolean {
  if (!move) return false;
  return move.inU === null ? move.nm !== 0 : Math.abs(move.inU) > MOVE_NEEDS_REASON_U;
}
