import type { Finding, ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import type { Picture } from '@/lib/imaging/picture';
import type { Measured } from './analyse-frame';

/** The checks of a frame, in four parts each. */
export function findingsOf(result: ReadingResult, measured: Measured, picture: Picture, setup: SetupValues): Finding[] {
  void result;
  void measured;
  void picture;
  void setup;
  return [];
}
