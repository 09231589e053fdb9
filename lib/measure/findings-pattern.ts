/** Checks of the pattern itself: envelope, contrast, stray light, misfit. */
import type { Finding } from '@/lib/domain/reading-result';
import { finding, movedBy, numberText, percent, type PatternContext } from './finding-context';
import { lineShare } from './further-results';

export function patternFindings(c: PatternContext): Finding[] {
  const list = [pull(c), contrast(c), background(c), misfit(c), lock(c), unequal(c), bandwidth(c)];
  for (const more of [second(c), missing(c), plate(c)]) if (more) list.push(more);
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
  const word = share > 0.12 ? 'stop' : share > 0.025 || c.result.chiSquareReduced > 5 ? 'look' : 'clear';
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

/** Did the fit take every second fringe for two, or two for one? */
function lock(c: PatternContext): Finding {
  const { lock: share, harmonic } = c.measured.evidence;
  const doubtful = share > 0.08 || Math.abs(harmonic) > 0.12;
  return finding(c, {
    check: 'lock',
    word: doubtful ? 'look' : 'clear',
    relative: doubtful ? (share > 0.08 ? 1 : 0.5) : 0,
    seen: doubtful
      ? 'Every second fringe looks different from its neighbours: the spacing may be half or double.'
      : 'No swing at half or at double the spacing.',
    size: doubtful ? 'The other choice would move the wavelength by {size}.' : 'Effect {size}.',
    done: 'Both other spacings were compared with the one that was fitted.',
    remedy: doubtful ? 'Look at the fringes beside the orders; choose a cleaner region.' : 'Nothing to do.',
  });
}

function unequal(c: PatternContext): Finding {
  const { fit } = c.measured.place.band;
  const { unequal: index } = fit.layout;
  if (index < 0)
    return finding(c, {
      check: 'unequal',
      word: 'clear',
      relative: 0,
      seen: 'No difference between the two slits shows.',
      size: 'Effect {size}.',
      done: 'Slits of unequal width were tried.',
      remedy: 'Nothing to do.',
    });
  const share = 2 * fit.result.parameters[index];
  return finding(c, {
    check: 'unequal',
    word: 'clear',
    width: share > 0.1 ? 'look' : undefined,
    visibility: share > 0.1 ? 'look' : undefined,
    relative: movedBy(c),
    seen: `The two slits differ by about ${percent(share)} in width.`,
    size: 'Allowing for it moved the wavelength by {size}.',
    done: 'Two widths were fitted; the width shown is their mean.',
    remedy: share > 0.1 ? 'Clean the slit plate, and measure its slits again.' : 'Nothing to do.',
  });
}

/** A second, weak fringe system: cover glass or a window. */
function second(c: PatternContext): Finding | null {
  const { second: system } = c.measured;
  // A scan has no bands that could tell one system from the other.
  if (c.take === 'scan') return null;
  if (system === null)
    return finding(c, {
      check: 'second-system',
      word: 'clear',
      relative: 0,
      seen: 'No second fringe system was found.',
      size: 'Effect {size}.',
      done: 'The misfit was searched for a wave of another spacing.',
      remedy: 'Nothing to do.',
    });
  const strength = Math.hypot(system.c, system.s);
  const period = 1 / Math.hypot(system.q, system.t);
  const scale = c.setup.scaleUmPerPx;
  const width = scale ? `${numberText((period * scale.value) / 1000)} mm` : `${numberText(period)} px`;
  return finding(c, {
    check: 'second-system',
    word: c.result.chiSquareReduced > 5 ? 'stop' : strength > 0.005 ? 'look' : 'clear',
    width: 'look',
    visibility: 'look',
    relative: movedBy(c),
    seen: `A second, weaker fringe system is in the frame (${percent(strength)}, period ${width}).`,
    size: 'Allowing for it moved the wavelength by {size}.',
    done:
      c.result.chiSquareReduced > 1.5
        ? 'It could be taken out in part only; what it can still pull is in the uncertainty.'
        : 'It was divided out of the light before the fit.',
    remedy: 'Take away or tilt the window or cover glass it comes from.',
  });
}

const NARROW_NM = 5;

/** Visibility falling with order. */
function bandwidth(c: PatternContext): Finding {
  const { fit } = c.measured.place.band;
  const width = c.result.bandwidth ?? null;
  if (fit.layout.fade < 0) {
    const limit = width?.limitNm ?? null;
    return finding(c, {
      check: 'bandwidth',
      word: 'clear',
      relative: 0,
      seen:
        limit === null
          ? 'The contrast does not fade with order as far as this frame can tell.'
          : `The contrast does not fade with order: the line is narrower than ${numberText(Math.max(NARROW_NM, limit))} nm.`,
      size: 'Effect {size}.',
      done: 'Contrast falling with order was tried.',
      remedy: 'Nothing to do.',
    });
  }
  const share = lineShare(fit.result.parameters[fit.layout.fade]);
  const nm = width?.fwhmNm ?? null;
  const u = width?.uFwhmNm ?? null;
  const line =
    nm === null
      ? `${percent(share)} of the wavelength`
      : nm < NARROW_NM
        ? `below ${NARROW_NM} nm`
        : `about ${numberText(nm)}${u === null ? '' : ` ± ${numberText(2 * u)}`} nm`;
  return finding(c, {
    check: 'bandwidth',
    word: nm !== null && nm < NARROW_NM ? 'clear' : 'look',
    visibility: 'look',
    relative: movedBy(c),
    seen: `Contrast fades outward: the line is ${line} wide.`,
    size: 'Allowing for it moved the wavelength by {size}.',
    done: 'Visibility falling with order was fitted.',
    remedy: `The result is the mean wavelength as this ${c.take === 'frame' ? 'camera' : 'detector'} sees it; use a narrower line for a sharper one.`,
  });
}
