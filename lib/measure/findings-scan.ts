/** The checks of a scan: those of any pattern, and what steps and detector do. */
import type { Finding } from '@/lib/domain/reading-result';
import { finding, numberText, percent, type PatternContext } from './finding-context';
import { gravestFirst } from './findings';
import { placeFindings } from './findings-geometry';
import { patternFindings } from './findings-pattern';

export interface ScanTaking {
  stepMm: number;
  detectorMm: number | null;
  uVisibility: number;
  /** Spacing with the detector taken as a point, or, where it is one, with a tenth of a fringe as its width. */
  otherSpacingMm: number;
}

export function scanFindings(c: PatternContext, taking: ScanTaking): Finding[] {
  return gravestFirst([sampling(c, taking), detector(c, taking), ...placeFindings(c), ...patternFindings(c)]);
}

/** Below ten points a fringe an uneven step shows; below six little is left between the orders. */
function sampling(c: PatternContext, { stepMm }: ScanTaking): Finding {
  const points = c.result.spacingPx / stepMm;
  const few = points < 6;
  return finding(c, {
    check: 'sampling',
    word: few ? 'look' : 'clear',
    width: points < 10 ? 'look' : undefined,
    visibility: few ? 'look' : undefined,
    relative: c.result.uSpacingPx / c.result.spacingPx,
    seen: `${few ? 'Only ' : ''}${numberText(points)} points for each fringe, ${numberText(stepMm)} mm apart.`,
    size: 'With them the fit is sure to {size}.',
    done: 'Every position was used as it stands, uneven steps included.',
    remedy: few ? 'Scan with steps of a tenth of a fringe or less.' : 'Nothing to do.',
  });
}

const sinc = (t: number) => (t === 0 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t));

const TOO_DEEP_SIGMAS = 3;

/** A detector of width D lowers the contrast to sinc(D / spacing); near a whole fringe nothing is left of it. */
function detector(c: PatternContext, { detectorMm, uVisibility, otherSpacingMm }: ScanTaking): Finding {
  const relative = otherSpacingMm / c.result.spacingPx - 1;
  if (detectorMm === null)
    return finding(c, {
      check: 'detector',
      word: 'clear',
      relative,
      seen: 'No detector width is stated: each point is taken as read at one place.',
      size: 'One a tenth of a fringe wide would move the wavelength by {size}.',
      done: 'Nothing was averaged.',
      remedy: 'Where the detector has a width, state it and fit again.',
    });
  const share = detectorMm / c.result.spacingPx;
  const wide = share > 0.75;
  // Fringes cannot be deeper than the light they are made of.
  const deep = c.measured.evidence.visibility - 1 > TOO_DEEP_SIGMAS * uVisibility;
  if (deep)
    return finding(c, {
      check: 'detector',
      word: 'look',
      width: 'look',
      visibility: 'stop',
      relative,
      seen: `The fringes are deeper than a detector ${numberText(share)} of a fringe wide can show them: it is narrower than stated.`,
      size: 'Taken as a point it would move the wavelength by {size}.',
      done: 'The model was averaged over the stated width.',
      remedy: 'Correct the width of the detector and fit again.',
    });
  return finding(c, {
    check: 'detector',
    word: wide ? 'look' : 'clear',
    width: wide ? 'look' : undefined,
    visibility: wide ? 'stop' : undefined,
    relative,
    seen: `The detector is ${numberText(share)} of a fringe wide: it leaves ${percent(Math.abs(sinc(share)))} of the contrast.`,
    size: 'Taken as a point it would move the wavelength by {size}.',
    done: 'The model was averaged over its width; the visibility is the light’s own.',
    remedy: wide ? 'Put a slit before it, at most half a fringe wide.' : 'Nothing to do.',
  });
}
