import { quantile } from '@/lib/imaging/channel';
import type { Picture } from '@/lib/imaging/picture';
import { reducePicture } from '@/lib/imaging/pyramid';
import { Refused } from '@/lib/imaging/refused';

/** Small enough that the noise of single pixels does not count as light. */
const LOOK_SIDE = 120;
const BLACK_SHARE = 0.04;
const DARK_SHARE = 0.1;
const BURNT_SHARE = 0.25;

/** Where no fringes were found: too little or too much light is named as the reason when it is one. */
export function refuseByLight(picture: Picture): void {
  const factor = Math.max(1, Math.floor(Math.max(picture.widthPx, picture.heightPx) / LOOK_SIDE));
  const plane = reducePicture(picture, factor);
  const low = quantile(plane.data, 0.05);
  const high = quantile(plane.data, 0.999);
  let burnt = 0;
  for (let i = 0; i < picture.samples.length; i += 3) if (picture.samples[i] >= picture.clipCode) burnt++;
  if (burnt / (picture.samples.length / 3) > BURNT_SHARE) {
    throw new Refused(
      'BURNT_OUT',
      `${Math.round((300 * burnt) / picture.samples.length)} % of the picture is at the white level, so the fringes are burnt out. Reduce the exposure until the brightest fringe stands at 50 to 80 %.`,
    );
  }
  // Full scale of a camera that fills only part of its file is a guess where nothing reaches it: both are asked.
  const ofFile = high / Math.max(1, picture.light[picture.light.length - 1]);
  if (high - low < BLACK_SHARE && ofFile < DARK_SHARE) {
    throw new Refused(
      'TOO_DARK',
      `The brightest part of the picture is ${(100 * ofFile).toFixed(1)} % of full scale and nothing stands out. Check the beam, open the shutter or expose longer.`,
    );
  }
}
