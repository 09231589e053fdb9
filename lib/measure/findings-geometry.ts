/** Checks of how camera, screen and plate stand. */
import type { Finding } from '@/lib/domain/reading-result';
import {
  finding,
  movedBy,
  numberText,
  percent,
  type FindingContext,
  type PatternContext,
} from './finding-context';
import { nearFieldRelative } from '@/lib/quantity/two-slit';

export function geometryFindings(c: FindingContext): Finding[] {
  return [tilt(c), yaw(c), keystone(c), ...placeFindings(c)];
}

/** Checks of where region, zero order and plate stand: of a frame or a scan. */
export function placeFindings(c: PatternContext): Finding[] {
  const list = [zeroOrder(c), regionOf(c)];
  const near = nearField(c);
  if (near) list.push(near);
  return list;
}

function tilt(c: FindingContext): Finding {
  const from = Math.abs(c.result.tiltDeg);
  const lean = Math.min(from, Math.abs(90 - from));
  const relative = 1 - Math.cos((lean * Math.PI) / 180);
  return finding(c, {
    check: 'tilt',
    word: lean > 3 ? 'look' : 'clear',
    relative,
    seen: `The fringes lean ${numberText(lean)}° against the sensor.`,
    size: 'Uncorrected that would be {size}.',
    done: 'The frame was straightened; spacing is taken square to the fringes.',
    remedy: lean > 3 ? 'Straighten the camera to below 3°.' : 'Nothing to do.',
  });
}

/** A screen seen from above or below: the fringes fan out, and the spacing belongs to one height in the frame. */
function keystone(c: FindingContext): Finding {
  const { fan, uFan } = c.measured.place.tilt;
  const height = c.measured.place.rect.heightPx;
  const change = Math.abs(fan) * height;
  const shows = change > 0.002 && Math.abs(fan) > 5 * uFan;
  return finding(c, {
    check: 'keystone',
    word: shows ? 'look' : 'clear',
    relative: shows ? change / 2 : 0,
    seen: shows
      ? `The spacing changes by ${percent(change)} along the fringes: the screen is seen from above or below.`
      : 'The spacing is the same along the fringes.',
    size: shows ? 'From the middle of the region to its edge that is {size}.' : 'Effect {size}.',
    done: shows
      ? 'Bands were stretched back; the spacing holds at the middle of the region.'
      : 'The spacings of the bands were compared.',
    remedy: shows
      ? 'Square up camera and screen, and take the scale at the height of the region’s middle.'
      : 'Nothing to do.',
  });
}

function yaw(c: FindingContext): Finding {
  const { fit, grid } = c.measured.place.band;
  if (fit.layout.chirp < 0) {
    return finding(c, {
      check: 'chirp',
      word: 'clear',
      relative: 0,
      seen: 'Fringes left and right of the middle are equally wide.',
      size: 'Effect {size}.',
      done: 'A change of spacing across the frame was looked for.',
      remedy: 'Nothing to do.',
    });
  }
  const change = 2 * fit.result.parameters[fit.layout.chirp] * (grid.half / fit.unitPx) * 2;
  const moved = movedBy(c);
  return finding(c, {
    check: 'chirp',
    word: Math.abs(change) > 0.002 ? 'look' : 'clear',
    relative: moved,
    seen: `The spacing changes by ${percent(Math.abs(change))} across the region: screen or sensor is seen at an angle.`,
    size: 'Allowing for it moved the wavelength by {size}.',
    done: 'The perspective was fitted; spacing and scale hold at the zero order.',
    remedy: 'Square up camera and screen, and take the scale at the zero order.',
  });
}

function zeroOrder(c: PatternContext): Finding {
  const { fit } = c.measured.place.band;
  const p = fit.result.parameters;
  const curve = fit.layout.curve >= 0 ? p[fit.layout.curve] : fit.fixed.curve;
  const relative = 1.5 * (curve * p[0]) ** 2;
  const { probability, next } = c.measured.zero;
  const odds = next > 0 ? Math.min(9999, probability / next) : 9999;
  const sure = odds > 20;
  return finding(c, {
    check: 'zero-order',
    word: sure ? 'clear' : 'look',
    relative,
    seen: sure
      ? 'The zero order stands at the middle of the envelope.'
      : `The zero order is most likely here; the next fringe is ${numberText(odds)} times less likely.`,
    size: 'One order to the side would change the wavelength by {size}.',
    done: 'The order nearest the middle of the envelope was taken.',
    remedy: sure ? 'Nothing to do.' : `Mark the zero order yourself, or take a ${c.take} with white light.`,
  });
}

function regionOf(c: PatternContext): Finding {
  const bright = c.result.orders.filter((o) => o.kind === 'bright');
  const left = bright.filter((o) => o.m < 0).length;
  const right = bright.filter((o) => o.m > 0).length;
  const enough = bright.length >= 7 && left >= 3 && right >= 3;
  return finding(c, {
    check: 'region',
    word: enough ? 'clear' : 'look',
    width: enough ? undefined : bright.length < 5 ? 'stop' : 'look',
    relative: c.result.uSpacingPx / c.result.spacingPx,
    seen: enough
      ? `The region holds ${bright.length} bright orders on both sides of the zero order.`
      : `The region holds ${bright.length} bright orders, ${left} to one side of the zero order and ${right} to the other.`,
    size: 'The fit is sure to {size}.',
    done: 'All orders in the region were used.',
    remedy: enough ? 'Nothing to do.' : 'Widen the region to at least 7 bright orders, 3 on each side.',
  });
}

/** w^2/(lambda L): how far the plane is from the far field of one slit. */
function nearField(c: PatternContext): Finding | null {
  const { widthUm, distanceMm } = c.setup;
  const nm = c.result.wavelengthNm;
  if (!widthUm || !distanceMm || nm === null) return null;
  const number = widthUm.value ** 2 / (nm * distanceMm.value);
  return finding(c, {
    check: 'distance',
    word: number > 0.05 ? 'stop' : number > 0.02 ? 'look' : 'clear',
    relative: nearFieldRelative(widthUm.value, nm, distanceMm.value),
    seen:
      number > 0.02
        ? 'The slit plate is near for this slit width.'
        : 'The slit plate is far enough away for this slit width.',
    size: 'The far-field formula is off by {size}.',
    done: 'The difference is in the budget.',
    remedy: number > 0.02 ? 'Use a longer distance or narrower slits.' : 'Nothing to do.',
  });
}
