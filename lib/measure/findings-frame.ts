/** Checks of what the camera and the file did to the light. */
import type { Finding } from '@/lib/domain/reading-result';
import { LEFT } from '@/lib/fit/cells';
import { finding, movedBy, numberText, percent, type FindingContext } from './finding-context';
import { demosaicRelative } from './wavelength';

export function frameFindings(c: FindingContext): Finding[] {
  const list = [clipping(c), exposure(c), tone(c), pixels(c), dust(c), grain(c)];
  if (c.picture.source.lossy) list.push(compression(c));
  if (c.picture.source.colour) list.push(demosaic(c));
  return list;
}

function clipping(c: FindingContext): Finding {
  const share = c.result.clippedShare;
  if (share <= 0.001) {
    return finding(c, {
      check: 'clipping',
      word: 'clear',
      relative: 0,
      seen:
        share > 0
          ? `${percent(share)} of the region is near the white level.`
          : 'No part of the region is clipped.',
      size: 'Effect {size}.',
      done: share > 0 ? 'Those places were left out.' : 'Nothing had to be left out.',
      remedy: 'Nothing to do.',
    });
  }
  return finding(c, {
    check: 'clipping',
    word: share > 0.45 ? 'stop' : 'look',
    width: share > 0.2 ? 'stop' : 'look',
    visibility: share > 0.2 ? 'stop' : 'look',
    relative: c.result.uSpacingPx / c.result.spacingPx,
    seen: `The brightest fringes are clipped: ${percent(share)} of the region.`,
    size: 'What is left fixes the wavelength to {size}.',
    done: 'Clipped places were left out, not filled in.',
    remedy: `Reduce the exposure to about ${Math.max(10, Math.round(70 / Math.max(1.1, c.result.peakShare / Math.max(0.3, 1 - share))))} %.`,
  });
}

function exposure(c: FindingContext): Finding {
  const peak = c.result.peakShare;
  const relative = c.result.uSpacingPx / c.result.spacingPx;
  if (peak >= 0.2 || c.result.clippedShare > 0.001) {
    return finding(c, {
      check: 'dim',
      word: 'clear',
      relative,
      seen: `The brightest fringe stands at ${percent(Math.min(1, peak))} of full scale.`,
      size: 'Noise leaves {size}.',
      done: 'Weights follow the light of the fit.',
      remedy: 'Nothing to do.',
    });
  }
  return finding(c, {
    check: 'dim',
    word: 'look',
    width: peak < 0.05 ? 'stop' : 'look',
    relative,
    seen: `Too dark: the brightest fringe stands at ${percent(peak)} of full scale.`,
    size: 'Noise leaves {size}.',
    done: 'The noise is in the uncertainty.',
    remedy: `Expose ${Math.min(50, Math.max(2, Math.round(0.7 / Math.max(0.01, peak))))} times longer.`,
  });
}

function tone(c: FindingContext): Finding {
  const { fit } = c.measured.place.band;
  const exponent = fit.layout.tone >= 0 ? fit.result.parameters[fit.layout.tone] : 1;
  const away = Math.abs(exponent - 1);
  const how = c.result.picture.toneBecause;
  if (away <= 0.03) {
    return finding(c, {
      check: 'tone',
      word: 'clear',
      width: c.picture.source.tone === 'srgb' ? 'look' : 'clear',
      relative: 0,
      seen: `The light fits a straight camera response after decoding (${how}).`,
      size: 'Effect {size}.',
      done: `The frame was read as ${c.result.picture.tone === 'srgb' ? 'sRGB' : 'linear'}.`,
      remedy: 'Nothing to do.',
    });
  }
  const moved = movedBy(c);
  return finding(c, {
    check: 'tone',
    word: away > 0.15 ? 'look' : 'clear',
    width: 'stop',
    visibility: 'stop',
    relative: moved,
    seen: `The frame went through a tone curve (exponent ${exponent.toFixed(2)}; read as ${c.result.picture.tone === 'srgb' ? 'sRGB' : 'linear'}, ${how}).`,
    size: 'Correcting it moved the wavelength by {size}.',
    done: 'The exponent was fitted together with the pattern.',
    remedy: 'Take frames in raw or linear mode; slit width and visibility need it.',
  });
}

function pixels(c: FindingContext): Finding {
  const spacing = c.result.spacingPx;
  const text = `A fringe is ${numberText(spacing)} px wide.`;
  const relative = spacing < 40 ? 1e-4 * (2.5 / spacing) ** 2 : 0;
  if (spacing >= 40)
    return finding(c, {
      check: 'pixels',
      word: 'clear',
      relative,
      seen: text,
      size: 'Effect {size}.',
      done: 'The model is averaged over each pixel.',
      remedy: 'Nothing to do.',
    });
  return finding(c, {
    check: 'pixels',
    word: 'look',
    width: spacing < 10 ? 'stop' : 'look',
    relative,
    seen: `Only ${numberText(spacing)} px for each fringe.`,
    size: 'A pixel that is not evenly sensitive costs up to {size}.',
    done: 'The model is averaged over each pixel.',
    remedy: 'Move the camera back or use a finer pixel scale.',
  });
}

/** So many of the 14 cells around one (two bins to each side, one band up and down) make it part of a mark. */
const CROWD = 4;

function outliersAround(
  left: ArrayLike<number>,
  data: { bins: number; bands: number },
  cell: number,
): number {
  const b = Math.floor(cell / data.bins);
  const j = cell % data.bins;
  let count = 0;
  for (let k = Math.max(0, b - 1); k <= Math.min(data.bands - 1, b + 1); k++) {
    for (let i = Math.max(0, j - 2); i <= Math.min(data.bins - 1, j + 2); i++) {
      if ((k !== b || i !== j) && left[k * data.bins + i] === LEFT.outlier) count++;
    }
  }
  return count;
}

function dust(c: FindingContext): Finding {
  const { state, data } = c.measured.place.band;
  let out = 0;
  let all = 0;
  let at = 0;
  for (let i = 0; i < state.left.length; i++) {
    if (data.pixels[i] === 0) continue;
    all++;
    // Grain throws single cells far from the mean all over the frame; a speck or a mark puts many beside each other.
    if (state.left[i] !== LEFT.outlier || outliersAround(state.left, data, i) < CROWD) continue;
    out++;
    at += data.u[i];
  }
  const share = all > 0 ? out / all : 0;
  const relative = c.result.uSpacingPx / c.result.spacingPx;
  if (share < 0.01)
    return finding(c, {
      check: 'dust',
      word: 'clear',
      relative: 0,
      seen:
        out > 0
          ? `${percent(share)} of the region does not follow the pattern (specks or single pixels).`
          : 'No dust, dead pixels or marks in the region.',
      size: 'Effect {size}.',
      done: out > 0 ? 'It was left out.' : 'Nothing had to be left out.',
      remedy: 'Nothing to do.',
    });
  return finding(c, {
    check: 'dust',
    word: share > 0.25 ? 'stop' : 'look',
    relative,
    seen: `${percent(share)} of the region does not follow the pattern: dust, marks or dead pixels, about ${Math.round(at / out + c.measured.place.rect.lengthPx / 2)} px along the region.`,
    size: 'What is left fixes the wavelength to {size}.',
    done: 'Those places were left out.',
    remedy: 'Clean sensor window and screen, or choose a region without the mark.',
  });
}

function grain(c: FindingContext): Finding {
  const { spread } = c.measured;
  const { fit } = c.measured.place.band;
  const relative = Math.max(spread.byBands, spread.byProfile) / fit.result.parameters[0];
  const nm = c.result.wavelengthNm === null ? null : relative * c.result.wavelengthNm;
  const times = spread.byNoise > 0 ? Math.max(spread.byBands, spread.byProfile) / spread.byNoise : 1;
  const rough = nm === null ? relative > 2.5e-4 : nm > 0.15;
  return finding(c, {
    check: 'bands',
    word: rough ? 'look' : 'clear',
    width: times > 3 ? 'look' : undefined,
    relative,
    seen: rough
      ? 'Grainy or uneven frame: its bands do not agree as well as their noise allows.'
      : `The bands along the fringes agree${times > 2 ? ', though less well than their noise allows' : ''}.`,
    size: 'Their scatter leaves {size}.',
    done: 'The scatter of the bands is in the uncertainty.',
    remedy: rough
      ? 'Use more rows, let the diffuser move, or put the bare sensor in the beam.'
      : 'Nothing to do.',
  });
}

function compression(c: FindingContext): Finding {
  const q = c.picture.source.jpegQuality;
  const relative = q === null ? 1e-5 : q >= 90 ? 3e-6 : q >= 70 ? 8e-6 : q >= 30 ? 6e-5 : 2e-4;
  const coarse = (25 / Math.min(25, c.result.spacingPx)) ** 2;
  const strong = q !== null && q < 60;
  return finding(c, {
    check: 'compression',
    word: strong ? 'look' : 'clear',
    width: q !== null && q < 90 ? 'stop' : 'look',
    relative: relative * coarse,
    seen:
      q === null
        ? 'The file is compressed with loss (WebP).'
        : `${strong ? 'Strongly compressed photo' : 'Compressed photo'} (JPEG quality about ${q}).`,
    size: 'That alone can move the wavelength by {size}.',
    done: 'Scatter between bands and along the profile is in the uncertainty.',
    remedy: strong
      ? 'Good for a quick look. Send PNG or TIFF for a report.'
      : 'PNG or TIFF, 16 bit, for slit width and visibility.',
  });
}

function demosaic(c: FindingContext): Finding {
  const relative = demosaicRelative(c.result.spacingPx);
  const fine = c.result.spacingPx < 50;
  return finding(c, {
    check: 'demosaic',
    word: fine ? 'look' : 'clear',
    visibility: fine ? 'stop' : undefined,
    relative,
    seen: `Colour sensor: only some pixels see this light (${c.picture.source.channel} was used), ${numberText(c.result.spacingPx)} px a fringe.`,
    size: 'Filled-in pixels can cost {size}.',
    done: 'The channel that carries the light and is not clipped was used alone.',
    remedy: fine ? 'Use a monochrome camera or more pixels for each fringe.' : 'Nothing to do.',
  });
}
