import type { BudgetRow, RefusalCode, SetupValues, Timing } from '@/lib/domain/reading-result';
import { MARGIN, offers } from '@/lib/fit/choose-terms';
import {
  AveragedModel,
  fitFrom,
  plainTerms,
  rebase,
  refit,
  stepsToZero,
  type CurvePrior,
  type ProfileFit,
} from '@/lib/fit/fit-profile';
import { fitNoise, varianceAt } from '@/lib/fit/noise';
import { listOrders, toModel } from '@/lib/fit/orders';
import { averagingNodes, type Profile } from '@/lib/fit/profile';
import { scanStartValues, type StartValues } from '@/lib/fit/start-values';
import { ModelPoint } from '@/lib/fit/two-slit-model';
import { Refused } from '@/lib/imaging/refused';
import type { Clock } from './measure-stack';
import { ENGINE_VERSION } from './engine-version';
import { readScan, type Scan } from './read-scan';
import { wavelengthOf } from './wavelength';

export interface ScanResult {
  ok: true;
  code: 'OK';
  message: string;
  spacingMm: number;
  uSpacingMm: number;
  dofSpacing: number | null;
  visibility: number;
  zeroOrder: { xMm: number };
  orders: { m: number; kind: 'bright' | 'dark'; xMm: number; uMm: number; pullMm: number | null }[];
  region: { fromMm: number; toMm: number };
  medium: 'air';
  wavelengthNm: number | null;
  wavelengthVacuumNm: number | null;
  uWavelengthNm: number | null;
  expandedNm: number | null;
  k: number | null;
  budget: BudgetRow[];
  envelopeZeroOrder: number | null;
  chiSquareReduced: number;
  engine: string;
  ms: Timing;
}

export interface ScanRefusal {
  ok: false;
  code: RefusalCode;
  message: string;
  engine: string;
  ms: Timing;
}

const SPACINGS_TRIED = 36;
const ROUNDS = 4;
const LEAST_SWING_SIGMAS = 5;
const FEWEST_FRINGES = 3;

/**
 * Measures a line scan with the same model as a frame; lengths in mm. `detectorMm` is the width of the detector, over which
 * the model is averaged. Noise is taken from the scatter about the fit and weighted by the fitted mean.
 */
export function analyseScan(
  text: string,
  detectorMm: number,
  setup: SetupValues,
  clock: Clock = () => 0,
): ScanResult | ScanRefusal {
  const start = clock();
  const ms: Timing = { decode: 0, find: 0, profile: 0, fit: 0, total: 0 };
  try {
    const scan = readScan(text);
    ms.decode = clock() - start;
    const result = measureScan(scan, detectorMm, setup, ms);
    ms.fit = clock() - start - ms.decode;
    ms.total = clock() - start;
    return result;
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    ms.total = clock() - start;
    return { ok: false, code: error.code, message: error.message, engine: ENGINE_VERSION, ms };
  }
}

function measureScan(scan: Scan, detectorMm: number, setup: SetupValues, ms: Timing): ScanResult {
  const prior = scanPrior(setup);
  const first = firstProfile(scan, detectorMm);
  let best: ProfileFit | null = null;
  for (const from of likelyStarts(first)) {
    const fit = fitFrom(first, from, plainTerms(prior), prior);
    if (best === null || fit.result.chiSquare < best.result.chiSquare) best = fit;
  }
  if (best === null) throw nothingFound();
  let fit = best;
  let profile = first;
  for (let round = 0; round < ROUNDS; round++) {
    profile = weighted(profile, scan, fit);
    const next = withTerms(profile, refit(profile, fit, fit.layout.terms));
    fit = rebase(profile, next, stepsToZero(next, null));
  }
  return resultOf(scan, profile, fit, setup, ms);
}

/** X/L with X in mm: the curvature per mm is 1/L. */
function scanPrior(setup: SetupValues): CurvePrior | null {
  const distance = setup.distanceMm;
  if (!distance) return null;
  return { value: 1 / distance.value, u: distance.u === null ? null : distance.u / distance.value ** 2 };
}

function firstProfile(scan: Scan, detectorMm: number): Profile {
  const n = scan.positionMm.length;
  const steps = Array.from({ length: n - 2 }, (_, i) =>
    Math.abs(scan.intensity[i] - 2 * scan.intensity[i + 1] + scan.intensity[i + 2]),
  ).sort((a, b) => a - b);
  const sigma = Math.max(1e-9, steps[steps.length >> 1] / 0.6745 / Math.sqrt(6));
  // A uniform slit of width D: variance D^2/12, fourth moment D^4/80.
  const { node, weight } = averagingNodes(detectorMm ** 2 / 12, detectorMm ** 4 / 80, 0);
  return {
    u: scan.positionMm,
    light: scan.intensity,
    sigma: Float64Array.from(scan.repeats, (r) => sigma / Math.sqrt(r)),
    node: new Float64Array(n).fill(node),
    nodeWeight: new Float64Array(n).fill(weight),
    size: n,
  };
}

/** Best starts over spacings from four steps to 0.45 of the scan. */
function likelyStarts(profile: Profile): StartValues[] {
  const n = profile.size;
  const span = profile.u[n - 1] - profile.u[0];
  const shortest = (4 * span) / (n - 1);
  const longest = 0.45 * span;
  const starts: StartValues[] = [];
  for (let i = 0; i < SPACINGS_TRIED; i++)
    starts.push(
      ...scanStartValues(profile, shortest * (longest / shortest) ** (i / (SPACINGS_TRIED - 1)), 1),
    );
  return starts.sort((a, b) => a.rest - b.rest).slice(0, 8);
}

/** Sigma of every point from the scatter about the fit at its fitted light. */
function weighted(profile: Profile, scan: Scan, fit: ProfileFit): Profile {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const n = profile.size;
  const light = new Float64Array(n);
  const q = new Float64Array(n);
  const rest = Math.max(0.3, 1 - fit.layout.size / n);
  for (let i = 0; i < n; i++) {
    if (
      !model.evaluate(
        fit.result.parameters,
        toModel(fit, profile.u[i]),
        profile.node[i] / fit.unitPx,
        profile.nodeWeight[i],
        false,
      )
    )
      continue;
    light[i] = model.light * fit.unitLight;
    q[i] = ((profile.light[i] - light[i]) ** 2 * scan.repeats[i]) / rest;
  }
  const noise = fitNoise(light, q, 1e-12);
  return {
    ...profile,
    sigma: Float64Array.from(light, (l, i) => Math.sqrt(varianceAt(noise, l) / scan.repeats[i])),
  };
}

/** Optional terms while the information criterion asks for them. */
function withTerms(profile: Profile, fit: ProfileFit): ProfileFit {
  let now = fit;
  for (let added = 0; added < 3; added++) {
    let best: { fit: ProfileFit; gain: number } | null = null;
    for (const terms of offers(now.layout.terms, { tone: false, chirp: false })) {
      const trial = refit(profile, now, terms);
      if (trial.result.covariance === null) continue;
      const scale = Math.max(1, trial.result.chiSquare / Math.max(1, trial.result.dof));
      const gain =
        (now.result.chiSquare - trial.result.chiSquare) / scale -
        (trial.layout.size - now.layout.size) * Math.log(trial.points) -
        MARGIN;
      if (gain > 0 && (best === null || gain > best.gain)) best = { fit: trial, gain };
    }
    if (best === null) return now;
    now = best.fit;
  }
  return now;
}

function resultOf(scan: Scan, profile: Profile, fit: ProfileFit, setup: SetupValues, ms: Timing): ScanResult {
  const p = fit.result.parameters;
  const n = fit.layout.size;
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof)) * correlation(profile, fit);
  const covariance = fit.result.covariance === null ? null : fit.result.covariance.map((c) => c * scale);
  const from = scan.positionMm[0];
  const to = scan.positionMm[scan.positionMm.length - 1];
  if (covariance === null || !(p[5] > LEAST_SWING_SIGMAS * Math.sqrt(covariance[5 * n + 5])))
    throw nothingFound();
  const spacingMm = p[0] * fit.unitPx;
  const uSpacingMm = Math.sqrt(covariance[0]) * fit.unitPx;
  if ((to - from) / spacingMm < FEWEST_FRINGES - 0.3)
    throw new Refused('TOO_FEW_FRINGES', 'The scan holds fewer than three fringes. Scan further.');
  if (p[2] > 0.8)
    throw new Refused('ONE_SLIT', 'This is the pattern of a single slit. Let the beam meet both slits.');
  if (!(uSpacingMm < 0.03 * spacingMm))
    throw new Refused('PATTERN_CUT', 'The scan does not fix the spacing. Scan more of the pattern.');
  // One mm of the scan is one mm of the plane: the "pixel scale" is exact.
  const mm: SetupValues = { ...setup, scaleUmPerPx: { value: 1000, u: 0, known: 'positions of the scan' } };
  const wavelength = wavelengthOf(
    {
      spacingPx: spacingMm,
      uSpacingPx: uSpacingMm,
      dof: fit.result.dof,
      known: 'type A, scatter about the fit',
    },
    mm,
    [],
  );
  return {
    ok: true,
    code: 'OK',
    message: 'The scan was measured.',
    spacingMm,
    uSpacingMm,
    dofSpacing: fit.result.dof,
    visibility: Math.min(1, p[5] / p[4]),
    zeroOrder: { xMm: fit.originPx + p[1] * fit.unitPx },
    orders: listOrders(fit, profile, covariance, from, to).map((o) => ({
      m: o.m,
      kind: o.kind,
      xMm: o.u,
      uMm: o.uPx,
      pullMm: o.pullPx,
    })),
    region: { fromMm: from, toMm: to },
    medium: 'air',
    wavelengthNm: wavelength.airNm,
    wavelengthVacuumNm: wavelength.vacuumNm,
    uWavelengthNm: wavelength.uNm,
    expandedNm: wavelength.expandedNm,
    k: wavelength.k,
    budget: wavelength.budget,
    envelopeZeroOrder: p[2] > 0.02 ? 1 / p[2] : null,
    chiSquareReduced: fit.result.chiSquare / Math.max(1, fit.result.dof),
    engine: ENGINE_VERSION,
    ms,
  };
}

/** Neighbouring residuals that go together carry less: 1 + 2 * (sum of autocorrelations until the first below noise). */
function correlation(profile: Profile, fit: ProfileFit): number {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const r: number[] = [];
  for (let i = 0; i < profile.size; i++) {
    if (
      !model.evaluate(
        fit.result.parameters,
        toModel(fit, profile.u[i]),
        profile.node[i] / fit.unitPx,
        profile.nodeWeight[i],
        false,
      )
    )
      continue;
    r.push((profile.light[i] / fit.unitLight - model.light) / profile.sigma[i]);
  }
  const power = r.reduce((s, v) => s + v * v, 0);
  let factor = 1;
  for (let lag = 1; lag < r.length / 4; lag++) {
    let s = 0;
    for (let i = lag; i < r.length; i++) s += r[i] * r[i - lag];
    if (!(s / power > 2 / Math.sqrt(r.length))) break;
    factor += (2 * s) / power;
  }
  return factor;
}

function nothingFound(): Refused {
  return new Refused(
    'NO_FRINGES',
    'No two-slit fringes were found in this scan. Check columns (position in mm, intensity) and that both slits are lit.',
  );
}
