/** Checks of the pattern itself: envelope, contrast, stray light, misfit. */
import type { Finding } from '@/lib/domain/reading-result';
import { finding, movedBy, numberText, percent, type PatternContext } from './finding-context';

export function patternFindings(c: PatternContext): Finding[] {
  const list = [pull(c), contrast(c), background(c), misfit(c)];
  for (const more of [missing(c), plate(c), bandwidth(c)]) if (more) list.push(more);
  return list;
}

/** What a straight line through the raw bright middles would make of this frame. */
function pull(c: PatternContext): Finding {
  const points = c.result.orders.filter((o) => o.kind === 'bright' && o.pullPx !== null);
  let relative = 0;
  let largest = 0;
  if (points.length >= 3) {
    const mean = points.reduce((s, o) => s + o.m, 0) / points.length;
    const spread = points.reduce((s, o) => s + (o.m - mean) ** 2, 0);
    relative = points.reduce((s, o) => s + (o.m - mean) * (o.pullPx ?? 0), 0) / spread / c.result.spacingPx;
    largest = Math.max(...points.map((o) => Math.abs(o.pullPx ?? 0))) / c.result.spacingPx;
  }
  return finding(c, {
    check: 'pull',
    word: 'clear',
    relative,
    seen: `Bright middles stand up to ${numberText(largest)} fringe away from their orders, pulled by the envelope.`,
    size: 'A line through them would be off by {size}.',
    done: 'The fit accounts for it; raw middles and order centres are both given.',
    remedy: 'Nothing to do.',
  });
}

function contrast(c: PatternContext): Finding {
  const v = c.result.visibility;
  const low = v < 0.3;
  return finding(c, {
    check: 'contrast',
    word: low ? 'look' : 'clear',
    visibility: c.picture?.source.tone === 'srgb' ? 'look' : undefined,
    relative: c.result.uSpacingPx / c.result.spacingPx,
    seen: `Visibility ${v.toFixed(2)}${low ? ', alike in all orders: vibration, a wide source or unequal light on the slits' : ''}.`,
    size: 'With it the fit is sure to {size}.',
    done: 'Visibility was fitted; it does not move the spacing.',
    remedy: low
      ? `${c.take === 'frame' ? 'Shorten the exposure, fix' : 'Fix'} the mount, narrow the source slit.`
      : 'Nothing to do.',
  });
}

function background(c: PatternContext): Finding {
  const { fit } = c.measured.place.band;
  const p = fit.result.parameters;
  const terms = fit.layout.terms.background;
  const level = p[6] / Math.max(1e-9, p[6] + p[4]);
  let bend = 0;
  for (let k = 1; k < terms; k++) bend += Math.abs(p[6 + k]);
  bend /= Math.max(1e-9, p[4]);
  const much = level > 0.25 || bend > 0.12;
  const moved = terms > 2 ? movedBy(c) : 0;
  return finding(c, {
    check: 'background',
    word: much ? 'look' : 'clear',
    relative: moved,
    seen: `Stray light of ${percent(Math.max(0, level))} of the peak${bend > 0.02 ? `, changing by ${percent(bend)} across the region` : ''}.`,
    size: terms > 2 ? 'Letting it bend moved the wavelength by {size}.' : 'Effect after the fit {size}.',
    done: terms > 2 ? `A background with ${terms} terms was fitted.` : 'A level and a slope were fitted.',
    remedy: much ? `Dim the room, block reflections, take a dark ${c.take}.` : 'Nothing to do.',
  });
}

/** Residual beyond noise relative to the fringes: at most 1 % is good, 2.5 % a look. */
function misfit(c: PatternContext): Finding {
  const share = c.measured.evidence.misfit;
  const word = share > 0.12 ? 'stop' : share > 0.025 ? 'look' : 'clear';
  return finding(c, {
    check: 'misfit',
    word,
    width: share > 0.025 ? 'stop' : undefined,
    relative: c.result.uSpacingPx / c.result.spacingPx,
    seen: `Data and fit differ by ${percent(share)} of the fringes beyond the noise.`,
    size: 'The uncertainty that follows is {size}.',
    done:
      word === 'clear' ? 'Nothing had to be done.' : 'The misfit along the profile is in the uncertainty.',
    remedy:
      word === 'clear'
        ? 'Nothing to do.'
        : `Look at the misfit curve; choose a cleaner region or take the ${c.take} again.`,
  });
}

function missing(c: PatternContext): Finding | null {
  const zero = c.result.envelopeZeroOrder;
  if (zero === null) return null;
  const near = Math.round(zero);
  const reach = Math.max(0, ...c.result.orders.map((o) => Math.abs(o.m)));
  if (near < 2 || Math.abs(zero - near) > 0.25 || reach < near) return null;
  return finding(c, {
    check: 'missing-order',
    word: 'clear',
    relative: 1 / near,
    seen: `Order ${near} is dark by design: the envelope is zero at order ${zero.toFixed(2)}.`,
    size: 'Counting its neighbours as neighbours would cost {size}.',
    done: 'Orders are counted by phase, so the count holds across it.',
    remedy: 'Nothing to do.',
  });
}

/** Fitted slit width against the plate's. */
function plate(c: PatternContext): Finding | null {
  const { separationUm, widthUm } = c.setup;
  const zero = c.result.envelopeZeroOrder;
  if (!separationUm || !widthUm || zero === null) return null;
  const fitted = separationUm.value / zero;
  const off = fitted / widthUm.value - 1;
  const { fit } = c.measured.place.band;
  const u =
    Math.sqrt(Math.max(0, c.measured.spread.covariance[2 * fit.layout.size + 2])) / fit.result.parameters[2];
  const differs = Math.abs(off) > 0.03 && Math.abs(off) > 3 * Math.hypot(u, (widthUm.u ?? 0) / widthUm.value);
  const trusted = fit.layout.tone < 0 && c.result.clippedShare < 0.1;
  return finding(c, {
    check: 'plate',
    word: differs && trusted && Math.abs(off) > 0.15 ? 'look' : 'clear',
    width: differs ? 'look' : undefined,
    relative: 0,
    seen: `Fitted slit width ${numberText(fitted)} µm, the plate says ${numberText(widthUm.value)} µm.`,
    size: 'The width was free in the fit: effect {size}.',
    done: 'The fit does not use the stated width.',
    remedy: differs ? 'Check that the right plate is mounted.' : 'Nothing to do.',
  });
}

/** Visibility falling with order as a Gaussian line: FWHM = width * lambda * sqrt(2 ln 2) / pi. */
function bandwidth(c: PatternContext): Finding | null {
  const { fit } = c.measured.place.band;
  if (fit.layout.fade < 0) return null;
  const share = (fit.result.parameters[fit.layout.fade] * Math.sqrt(2 * Math.LN2)) / Math.PI;
  const nm = c.result.wavelengthNm === null ? null : share * c.result.wavelengthNm;
  const line =
    nm === null
      ? `${percent(share)} of the wavelength`
      : nm < 5
        ? 'below 5 nm'
        : `about ${numberText(nm)} nm`;
  const moved = movedBy(c);
  return finding(c, {
    check: 'bandwidth',
    word: nm !== null && nm < 5 ? 'clear' : 'look',
    visibility: 'look',
    relative: moved,
    seen: `Contrast fades outward: the line is ${line} wide.`,
    size: 'Allowing for it moved the wavelength by {size}.',
    done: 'Visibility falling with order was fitted.',
    remedy: `The result is the mean wavelength as this ${c.take === 'frame' ? 'camera' : 'detector'} sees it; use a narrower line for a sharper one.`,
  });
}
