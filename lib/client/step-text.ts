import { formatNumber } from '@/lib/quantity/format';

/** One more place for a number that a person has set to it; the engine's own numbers are longer still. */
export function placesShown(value: number, places: number): number {
  const finer = value * 10 ** (places + 1);
  const isSet = Math.abs(finer - Math.round(finer)) < 1e-6;
  return isSet && Math.round(finer) % 10 !== 0 ? places + 1 : places;
}

/** A step with as many decimals as it has. */
export const stepText = (step: number) =>
  formatNumber(step, Math.max(0, -Math.floor(Math.log10(step) + 1e-9)));
