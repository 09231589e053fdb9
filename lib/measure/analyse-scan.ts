import {
  REFUSALS,
  type BudgetRow,
  type Finding,
  type SetupValues,
  type Timing,
} from '@/lib/domain/reading-result';
import type {
  ScanAnswer,
  ScanCurves,
  ScanFacts,
  ScanOptions,
  ScanOrder,
  ScanResult,
} from '@/lib/domain/scan-result';
import { fitOneSlit, ratioU } from '@/lib/fit/fit-profile';
import { listOrders } from '@/lib/fit/orders';
import { Refused } from '@/lib/imaging/refused';
import { profileCurves, stripOf } from './curves';
import { ENGINE_VERSION } from './engine-version';
import type { PatternContext } from './finding-context';
import { messageFor } from './findings';
import { scanFindings } from './findings-scan';
import { fitScan, spacingWith, type ScanFit } from './fit-scan';
import { bandwidthOf, slitOf, wordsOf } from './further-results';
import type { Clock } from './measure-stack';
import { oneSlit, refuseOtherSlits, weigh, type Evidence, type FittedPattern } from './judge';
import { readScan, scanFacts, scanWithin, textOf } from './read-scan';
import { frameEffects, wavelengthOf, type Wavelength } from './wavelength';

const LEAST_SWING_SIGMAS = 5;
const FEWEST_FRINGES = 3;
const FINEST_STEPS = 2.5;
const MOST_MISFIT = 0.3;
const MOST_RELATIVE_U = 0.03;
const MOST_ONE_SLIT_CHI = 4;
const LEAST_TIMES_EVEN = 10;
const LOBES = 2.6;
/** A point of a scan has no extent beside its detector's, which is in the model. */
const AS_IT_STANDS = { node: 0, weight: 0 };

/**
 * Measures a line scan with the same model as a frame; lengths in mm. Bad input of any kind is an answer (`ok: false` with
 * code and message), never an exception.
 */
export function analyseScan(
  bytes: Uint8Array,
  setup: SetupValues,
  options: ScanOptions,
  clock: Clock = () => 0,
): ScanAnswer {
  const start = clock();
  const ms: Timing = { decode: 0, find: 0, profile: 0, fit: 0, total: 0 };
  let facts: ScanFacts | null = null;
  try {
    const text = textOf(bytes);
    if (text === null)
      throw new Refused(
        'BROKEN_FILE',
        'This file is no text. A scan is a text of two columns, position in mm and intensity: save it so and send it again.',
      );
    const scan = readScan(text);
    facts = scanFacts(scan);
    ms.decode = clock() - start;
    const region = options.region ?? { fromMm: facts.fromMm, toMm: facts.toMm };
    const part = scanWithin(scan, region);
    const fitted = fitScan(part, options, setup);
    if (fitted === null) throw nothingFound();
    const { stepMm } = scanFacts(part);
    const evidence = judgeScan(fitted, stepMm);
    const result = resultOf(fitted, evidence, setup, { ...options, region }, { ...facts, stepMm }, ms);
    ms.fit = clock() - start - ms.decode;
    ms.total = clock() - start;
    return result;
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    // The sentence of a frame speaks of a camera.
    const { code, message } = error.code === 'NO_FRINGES' ? nothingFound() : error;
    ms.total = clock() - start;
    return {
      ok: false,
      code,
      message,
      engine: ENGINE_VERSION,
      fileAtFault: facts === null && REFUSALS[code],
      picture: null,
      scan: facts,
      ms,
    };
  }
}

const patternOf = ({ fit, profile }: ScanFit): FittedPattern => ({
  band: { fit, profile, grid: { half: (profile.u[profile.size - 1] - profile.u[0]) / 2 } },
});

/** Throws the refusal that fits, or returns the evidence of a pattern that can be answered. */
function judgeScan(fitted: ScanFit, stepMm: number): Evidence {
  const { fit, covariance } = fitted;
  const pattern = patternOf(fitted);
  const evidence = weigh(pattern);
  if (!(evidence.swingSigmas > LEAST_SWING_SIGMAS) || covariance === null)
    throw isOneSlit(fitted) ? oneSlit() : nothingFound();
  const spacingMm = fit.result.parameters[0] * fit.unitPx;
  if (spacingMm < FINEST_STEPS * stepMm)
    throw new Refused(
      'TOO_FINE',
      `The fringes are ${(spacingMm / stepMm).toFixed(1)} steps apart; below ${FINEST_STEPS} steps a scan cannot hold them. Scan with finer steps.`,
    );
  refuseOtherSlits(pattern, evidence);
  if (evidence.fringes < FEWEST_FRINGES)
    throw new Refused(
      'TOO_FEW_FRINGES',
      `The scan holds ${evidence.fringes === 0 ? 'no whole fringe' : `only ${evidence.fringes} bright ${evidence.fringes === 1 ? 'fringe' : 'fringes'}`}; at least ${FEWEST_FRINGES} are needed. Scan further or widen the region.`,
    );
  if (!(evidence.misfit < MOST_MISFIT)) throw nothingFound();
  if (!(Math.sqrt(covariance[0]) < MOST_RELATIVE_U * fit.result.parameters[0]))
    throw new Refused('PATTERN_CUT', 'The scan does not fix the spacing. Scan more of the pattern.');
  if (fit.result.status !== 'converged' && fit.result.status !== 'stalled')
    throw new Refused(
      'NOT_CONVERGED',
      'The fit did not settle on one pattern. Choose the region by hand or scan again.',
    );
  return evidence;
}

/** Light without fringes that one slit describes, far better than even light does, its first side maxima in the scan. */
function isOneSlit({ fit, profile }: ScanFit): boolean {
  const one = fitOneSlit(profile, fit);
  if (one === null || !(one.chiSquare < MOST_ONE_SLIT_CHI * one.dof)) return false;
  const { u, light, sigma, size } = profile;
  const mean = light.reduce((s, v) => s + v, 0) / size;
  const even = light.reduce((s, v, i) => s + ((v - mean) / sigma[i]) ** 2, 0);
  const lobeMm = fit.unitPx / one.parameters[2];
  return even > LEAST_TIMES_EVEN * one.chiSquare && u[size - 1] - u[0] > LOBES * lobeMm;
}

function resultOf(
  fitted: ScanFit,
  evidence: Evidence,
  setup: SetupValues,
  options: ScanOptions & Required<Pick<ScanOptions, 'region'>>,
  scan: ScanFacts,
  ms: Timing,
): ScanResult {
  const { fit, profile } = fitted;
  const covariance = covarianceOf(fitted);
  const p = fit.result.parameters;
  const spacingMm = p[0] * fit.unitPx;
  const uSpacingMm = Math.sqrt(covariance[0]) * fit.unitPx;
  const wavelength = wavelengthOfScan(spacingMm, uSpacingMm, fitted.dof, setup);
  const orders = ordersOf(fitted, covariance, options);
  const curves = profileCurves(
    fit,
    profile,
    (from, to) => leftPoint(fitted, from, to),
    (u) => u,
  );
  const { fromPx, stepPx, light } = stripOf(curves);
  const visibility = Math.min(1, evidence.visibility);
  const uVisibility = ratioU(p, covariance, fit.layout.size);
  const envelopeZeroOrder = p[2] > 0.02 && p[2] < 0.9 ? 1 / p[2] : null;
  const result: ScanResult = {
    ok: true,
    code: 'OK',
    message: '',
    spacingMm,
    uSpacingMm,
    dofSpacing: fitted.dof,
    visibility,
    uVisibility: Number.isFinite(uVisibility) ? uVisibility : null,
    zeroOrder: { xMm: orders.find((o) => o.m === 0)?.xMm ?? fit.originPx + p[1] * fit.unitPx },
    orders,
    region: options.region,
    scan,
    detectorMm: options.detectorMm,
    medium: 'air',
    wavelengthNm: wavelength.airNm,
    wavelengthVacuumNm: wavelength.vacuumNm,
    uWavelengthNm: wavelength.uNm,
    expandedNm: wavelength.expandedNm,
    k: wavelength.k,
    dofWavelength: wavelength.dof,
    budget: wavelength.budget,
    findings: [],
    engine: ENGINE_VERSION,
    peak: Math.max(...curves.fit),
    envelopeZeroOrder,
    envelopeCentreMm: fit.originPx + (p[1] + p[3] * p[0]) * fit.unitPx,
    chiSquareReduced: fit.result.chiSquare / Math.max(1, fit.result.dof),
    curves: inMm(curves),
    strip: { fromMm: fromPx, stepMm: stepPx, light },
    ms,
  };
  result.bandwidth = bandwidthOf(fitted, covariance, result.wavelengthNm);
  result.findings = findingsFor(result, fitted, evidence, setup);
  const words = wordsOf(result.findings);
  result.words = words;
  const spread = { covariance, dof: fitted.dof };
  result.slit = words.width === 'stop' ? null : slitOf(patternOf(fitted), spread, setup);
  result.message = messageFor('scan', result.findings);
  return result;
}

/** The checks see a scan as they see a frame, its mm in place of px. */
function findingsFor(result: ScanResult, fitted: ScanFit, evidence: Evidence, setup: SetupValues): Finding[] {
  const { wavelengthNm, spacingMm, uSpacingMm, visibility, envelopeZeroOrder, detectorMm } = result;
  const context: PatternContext = {
    take: 'scan',
    result: {
      wavelengthNm,
      spacingPx: spacingMm,
      uSpacingPx: uSpacingMm,
      visibility,
      envelopeZeroOrder,
      clippedShare: 0,
      bandwidth: result.bandwidth,
      chiSquareReduced: result.chiSquareReduced,
      orders: result.orders.map(({ m, kind, pullMm }) => ({ m, kind, pullPx: pullMm })),
    },
    measured: {
      place: patternOf(fitted),
      spread: { covariance: covarianceOf(fitted) },
      evidence,
      zero: fitted.zero,
      plainSpacing: fitted.plainSpacingMm,
      second: null,
    },
    setup,
  };
  return scanFindings(context, {
    stepMm: result.scan.stepMm,
    detectorMm,
    uVisibility: result.uVisibility ?? Infinity,
    otherSpacingMm: spacingWith(fitted, detectorMm === null ? 0.1 * spacingMm : null),
  });
}

/** A fit without a covariance has been refused before. */
function covarianceOf({ fit, covariance }: ScanFit): Float64Array {
  return covariance ?? new Float64Array(fit.layout.size ** 2);
}

/** One mm of the scan is one mm of the plane: as if a pixel were one mm, exactly. */
function wavelengthOfScan(
  spacingMm: number,
  uSpacingMm: number,
  dof: number,
  setup: SetupValues,
): Wavelength {
  const mm: SetupValues = { ...setup, scaleUmPerPx: { value: 1000, u: 0 } };
  const effects = frameEffects({ source: { colour: false } }, mm, spacingMm);
  const known = 'type A, scatter about the fit';
  const wavelength = wavelengthOf({ spacingPx: spacingMm, uSpacingPx: uSpacingMm, dof, known }, mm, effects);
  const inScan = (row: BudgetRow): BudgetRow => (row.key === 'fit' ? { ...row, unit: 'mm' } : row);
  return { ...wavelength, budget: wavelength.budget.filter((row) => row.key !== 'scale').map(inScan) };
}

function ordersOf(
  { fit, profile }: ScanFit,
  covariance: Float64Array,
  { region, leaveOut = [] }: ScanOptions & Required<Pick<ScanOptions, 'region'>>,
): ScanOrder[] {
  const from = Math.max(region.fromMm, profile.u[0]);
  const to = Math.min(region.toMm, profile.u[profile.size - 1]);
  return listOrders(fit, profile, covariance, from, to, AS_IT_STANDS).map((o) => ({
    m: o.m,
    kind: o.kind,
    xMm: o.u,
    uMm: o.uPx,
    pullMm: o.pullPx,
    used: !leaveOut.includes(o.m),
  }));
}

function leftPoint({ profile, sigma }: ScanFit, from: number, to: number) {
  const middle = (from + to - 1) >> 1;
  return { u: profile.u[middle], light: profile.light[middle], sigma: sigma[middle] };
}

function inMm({ alongPx, ...curves }: ReturnType<typeof profileCurves>): ScanCurves {
  return { xMm: alongPx, ...curves };
}

export function nothingFound(): Refused {
  return new Refused(
    'NO_FRINGES',
    'No two-slit fringes were found in this scan. Check columns (position in mm, intensity) and that both slits are lit.',
  );
}
