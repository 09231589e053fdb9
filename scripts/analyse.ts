import { readFile } from 'node:fs/promises';
import { performance } from 'node:perf_hooks';
import type { Estimate, FrameAnswer, SetupValues, Timing, ToneChoice } from '@/lib/domain/reading-result';
import type { FitResult, ScanAnswer } from '@/lib/domain/scan-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { analyseScan } from '@/lib/measure/analyse-scan';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';

const USAGE = `Usage: npm run --silent analyse -- FILE... [--list FILE.jsonl]
  [--scale-um-per-px N] [--separation-um N] [--width-um N] [--distance-mm N]
  [--u-scale-um-per-px N] [--u-separation-um N] [--u-width-um N] [--u-distance-mm N]
  [--linear | --srgb]
       npm run --silent analyse -- --scan FILE [--detector-mm N] --separation-um N --distance-mm N
One JSON line per frame. Values in a list override those of the command line.
`;

const NUMBERS = {
  '--scale-um-per-px': 'scaleUmPerPx',
  '--separation-um': 'separationUm',
  '--width-um': 'widthUm',
  '--distance-mm': 'distanceMm',
  '--u-scale-um-per-px': 'uScaleUmPerPx',
  '--u-separation-um': 'uSeparationUm',
  '--u-width-um': 'uWidthUm',
  '--u-distance-mm': 'uDistanceMm',
} as const;
type NumberKey = (typeof NUMBERS)[keyof typeof NUMBERS];
type Numbers = Partial<Record<NumberKey, number>>;

interface Job {
  file: string;
  numbers: Numbers;
  /** A line scan: position in mm and intensity in two columns. */
  scan: boolean;
}

interface Plan {
  jobs: Job[];
  tone: ToneChoice;
  detectorMm: number | null;
}

class WrongUsage extends Error {}

/** Runs the command; answers the exit code. */
export async function main(args: string[]): Promise<number> {
  let plan: Plan;
  try {
    plan = await readArguments(args);
  } catch (error) {
    if (!(error instanceof WrongUsage)) throw error;
    process.stderr.write(`${error.message}\n${USAGE}`);
    return 2;
  }
  for (const job of plan.jobs) {
    const line = await analyseFile(job, plan);
    await new Promise<void>((resolve, reject) =>
      process.stdout.write(`${JSON.stringify(line)}\n`, (e) => (e ? reject(e) : resolve())),
    );
  }
  return 0;
}

async function readArguments(args: string[]): Promise<Plan> {
  const files: string[] = [];
  const lists: string[] = [];
  const scans: string[] = [];
  let detectorMm: number | null = null;
  const numbers: Numbers = {};
  let tone: ToneChoice = 'auto';
  for (let i = 0; i < args.length; i++) {
    const arg = args[i];
    if (arg === '--linear' || arg === '--srgb') {
      const wish: ToneChoice = arg === '--linear' ? 'linear' : 'srgb';
      if (tone !== 'auto' && tone !== wish) throw new WrongUsage('Choose --linear or --srgb, not both.');
      tone = wish;
    } else if (arg === '--scan') {
      if (i + 1 >= args.length) throw new WrongUsage('--scan needs a file.');
      scans.push(args[++i]);
    } else if (arg === '--detector-mm') {
      detectorMm = positive(arg, args[++i]);
    } else if (arg === '--list') {
      if (i + 1 >= args.length) throw new WrongUsage('--list needs a file.');
      lists.push(args[++i]);
    } else if (arg in NUMBERS) {
      numbers[NUMBERS[arg as keyof typeof NUMBERS]] = positive(arg, args[++i]);
    } else if (arg.startsWith('--')) throw new WrongUsage(`${arg} is not known.`);
    else files.push(arg);
  }
  const jobs: Job[] = [
    ...files.map((file) => ({ file, numbers, scan: false })),
    ...scans.map((file) => ({ file, numbers, scan: true })),
  ];
  for (const list of lists) jobs.push(...(await readList(list, numbers)));
  if (jobs.length === 0 && lists.length === 0) throw new WrongUsage('Name at least one frame.');
  return { jobs, tone, detectorMm };
}

function positive(name: string, text: string | undefined): number {
  const value = Number(text);
  if (text === undefined || text.trim() === '' || !Number.isFinite(value) || !(value > 0))
    throw new WrongUsage(`${name} needs a number larger than 0.`);
  return value;
}

async function readList(path: string, common: Numbers): Promise<Job[]> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch {
    throw new WrongUsage(`The list ${path} cannot be read.`);
  }
  const jobs: Job[] = [];
  text.split(/\r?\n/).forEach((line, index) => {
    if (line.trim() === '') return;
    const where = `Line ${index + 1} of ${path}`;
    let entry: unknown;
    try {
      entry = JSON.parse(line);
    } catch {
      throw new WrongUsage(`${where} is not JSON.`);
    }
    if (typeof entry !== 'object' || entry === null || !('file' in entry) || typeof entry.file !== 'string')
      throw new WrongUsage(`${where} names no file.`);
    const numbers: Numbers = { ...common };
    const fields = entry as Record<string, unknown>;
    for (const key of Object.values(NUMBERS)) {
      const value = fields[key];
      if (value === undefined || value === null) continue;
      if (typeof value !== 'number' || !Number.isFinite(value) || !(value > 0))
        throw new WrongUsage(`${where}: ${key} must be a number larger than 0.`);
      numbers[key] = value;
    }
    jobs.push({ file: entry.file, numbers, scan: false });
  });
  return jobs;
}

function setupOf(n: Numbers): SetupValues {
  const pair = (value: number | undefined, u: number | undefined): Estimate | undefined =>
    value === undefined ? undefined : { value, u: u ?? null };
  return {
    scaleUmPerPx: pair(n.scaleUmPerPx, n.uScaleUmPerPx),
    separationUm: pair(n.separationUm, n.uSeparationUm),
    widthUm: pair(n.widthUm, n.uWidthUm),
    distanceMm: pair(n.distanceMm, n.uDistanceMm),
  };
}

async function analyseFile(job: Job, plan: Plan): Promise<object> {
  let bytes: Uint8Array;
  try {
    bytes = await readFile(job.file);
  } catch (error) {
    const missing = error instanceof Error && 'code' in error && error.code === 'ENOENT';
    const message = missing
      ? 'There is no such file. Check the name and the folder.'
      : 'The file cannot be read. Check that it is a file and that it may be read.';
    return {
      file: job.file,
      ok: false,
      code: missing ? 'NO_SUCH_FILE' : 'UNREADABLE_FILE',
      message,
      engine: ENGINE_VERSION,
      ms: { decode: 0, find: 0, profile: 0, fit: 0, total: 0 },
    };
  }
  const clock = () => performance.now();
  if (job.scan)
    return scanLine(
      job.file,
      analyseScan(bytes, setupOf(job.numbers), { detectorMm: plan.detectorMm }, clock),
    );
  return lineFor(job.file, await analyseFrame(bytes, setupOf(job.numbers), { tone: plan.tone }, clock));
}

/** The line of one scan: a frame's keys with mm in place of px. */
function scanLine(file: string, answer: ScanAnswer): object {
  if (!answer.ok) {
    const { ok, code, message, engine, fileAtFault, scan } = answer;
    return { file, ok, code, message, engine, ms: rounded(answer.ms), fileAtFault, scan };
  }
  return {
    file,
    ok: true,
    code: answer.code,
    message: answer.message,
    spacingMm: answer.spacingMm,
    uSpacingMm: answer.uSpacingMm,
    dofSpacing: answer.dofSpacing,
    visibility: answer.visibility,
    zeroOrder: answer.zeroOrder,
    orders: answer.orders.map(({ m, kind, xMm, uMm, pullMm }) => ({ m, kind, xMm, uMm, pullMm })),
    region: answer.region,
    ...alike(answer),
    uVisibility: answer.uVisibility,
    dofWavelength: answer.dofWavelength,
    envelopeZeroOrder: answer.envelopeZeroOrder,
    peak: answer.peak,
    chiSquareReduced: answer.chiSquareReduced,
    scan: answer.scan,
    detectorMm: answer.detectorMm,
  };
}

const rounded = (ms: Timing) =>
  Object.fromEntries(Object.entries(ms).map(([k, v]: [string, number]) => [k, Math.round(v * 1000) / 1000]));

/** What the lines of a frame and of a scan have alike, in the order of the command's description. */
function alike(answer: FitResult): object {
  const given = <T>(key: string, value: T | null) => (value === null ? {} : { [key]: value });
  return {
    medium: answer.medium,
    ...given('wavelengthNm', answer.wavelengthNm),
    ...given('wavelengthVacuumNm', answer.wavelengthVacuumNm),
    ...given('uWavelengthNm', answer.uWavelengthNm),
    ...given('expandedNm', answer.expandedNm),
    ...given('k', answer.k),
    findings: answer.findings.map(({ check, word, message }) => ({ check, word, message })),
    engine: answer.engine,
    ms: rounded(answer.ms),
  };
}

/** The line of one frame: the keys of the command's description first, further ones at the end. */
export function lineFor(file: string, answer: FrameAnswer): object {
  if (!answer.ok)
    return {
      file,
      ok: false,
      code: answer.code,
      message: answer.message,
      engine: answer.engine,
      ms: rounded(answer.ms),
      fileAtFault: answer.fileAtFault,
      picture: answer.picture,
    };
  return {
    file,
    ok: true,
    code: answer.code,
    message: answer.message,
    spacingPx: answer.spacingPx,
    uSpacingPx: answer.uSpacingPx,
    dofSpacing: answer.dofSpacing,
    tiltDeg: answer.tiltDeg,
    visibility: answer.visibility,
    zeroOrder: answer.zeroOrder,
    orders: answer.orders.map(({ m, kind, xPx, yPx, uPx, pullPx }) => ({ m, kind, xPx, yPx, uPx, pullPx })),
    region: answer.region,
    ...alike(answer),
    uTiltDeg: answer.uTiltDeg,
    uVisibility: answer.uVisibility,
    dofWavelength: answer.dofWavelength,
    envelopeZeroOrder: answer.envelopeZeroOrder,
    peakShare: answer.peakShare,
    clippedShare: answer.clippedShare,
    chiSquareReduced: answer.chiSquareReduced,
    picture: answer.picture,
  };
}
