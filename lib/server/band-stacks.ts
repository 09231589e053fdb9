import 'server-only';
import { webcrypto } from 'node:crypto';
import type { BandStackRow } from '@/models/band-stack';
import { AppError } from '@/lib/domain/errors';
import type { FitOptions, ReadingResult, Region, StackPlan } from '@/lib/domain/reading-result';
import type { FitFacts, RegionChange } from '@/lib/domain/views';
import { stackCovers } from '@/lib/measure/band-stack';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { decodeStack } from '@/lib/measure/stack-file';
import { canonicalJson } from './canonical';
import { db, select } from './db';
import type { loadFrame } from './frame-facts';
import { log } from './log';
import { stackInPool } from './measure-pool';
import { originalKey, putObject, readObject, stackKey } from './storage';

type FrameRow = Awaited<ReturnType<typeof loadFrame>>;

/** A change of a picture's region. */
type PictureChange = RegionChange & { region: Region };

/** A band stack that is in the store, with its bytes. */
export interface StoredStack {
  sha256: string;
  bytes: Uint8Array<ArrayBuffer>;
}

type StackRow = Pick<BandStackRow, 'sha256' | 'planJson'>;

/** Kept stacks of a frame that are looked through; older ones are made again when they are asked for. */
const MOST_LOOKED_AT = 200;

/** A page loaded before the engine was renewed would show numbers that the server does not keep. */
export function requireEngine(version: string): void {
  if (version === ENGINE_VERSION) return;
  throw new AppError(
    'CHANGED_MEANWHILE',
    'The engine was renewed since this page was loaded, and the numbers here would not be those that are kept. Load the page again.',
  );
}

/** The stack a reading was measured from; a new one for its region where another engine measured it. */
export async function stackOfReading(
  frame: FrameRow,
  facts: FitFacts,
  readingId: number,
): Promise<StoredStack> {
  const [row] = await select<{ engine: string; result: string; options: string }>(
    `SELECT r.engine, rr.result_json AS result, r.options_json AS options FROM readings r
     JOIN reading_results rr ON rr.reading_id = r.id WHERE r.id = :readingId AND r.frame_id = :frameId`,
    { readingId, frameId: frame.id },
  );
  if (!row) throw new AppError('NOT_FOUND', 'There is no such reading of this frame.');
  const { stack: plan, region } = JSON.parse(row.result) as ReadingResult;
  if (plan && row.engine === ENGINE_VERSION) return stackAfter(frame, facts, plan);
  const { leaveOut = [], zeroShift = 0 } = JSON.parse(row.options) as FitOptions;
  return stackForRegion(frame, facts, { region, leaveOut, zeroShift });
}

/** A stack made for this very region, now or before. Throws CANNOT_FIT with the engine's sentence where there is none. */
export async function stackForRegion(
  frame: FrameRow,
  facts: FitFacts,
  { region, leaveOut, zeroShift }: PictureChange,
): Promise<StoredStack> {
  const text = canonicalJson(region);
  const row = await findRow(frame, facts, (plan) => canonicalJson(plan.region) === text);
  if (row) return openStack(frame, facts, row);
  return once(frame.id, { region, leaveOut, zeroShift }, () =>
    make(frame, facts, { region, tone: facts.tone, leaveOut, zeroShift }),
  );
}

/**
 * The stack a region is fitted from: the named one, when it is this frame's, of this engine, and holds the region;
 * otherwise one that is made for it.
 */
export async function stackForFit(
  frame: FrameRow,
  facts: FitFacts,
  wanted: PictureChange,
  sha256: string | null,
): Promise<StoredStack> {
  const named = sha256 === null ? null : await namedStack(frame, facts, sha256);
  if (named && stackCovers(decodeStack(named.bytes), wanted.region)) return named;
  return stackForRegion(frame, facts, wanted);
}

async function namedStack(frame: FrameRow, facts: FitFacts, sha256: string): Promise<StoredStack | null> {
  const row = await db().tables.bandStacks.findOne({ where: { ...own(frame, facts), sha256 } });
  return row ? openStack(frame, facts, row) : null;
}

/** The stack of a plan, from the store or made from the frame's bytes. */
async function stackAfter(frame: FrameRow, facts: FitFacts, plan: StackPlan): Promise<StoredStack> {
  const text = canonicalJson(plan);
  const row = await findRow(frame, facts, (kept) => canonicalJson(kept) === text);
  if (row) return openStack(frame, facts, row);
  return once(frame.id, plan, () => make(frame, facts, { tone: facts.tone, stack: plan }));
}

/** The newest kept stack whose plan is the wanted one. */
async function findRow(
  frame: FrameRow,
  facts: FitFacts,
  isWanted: (plan: StackPlan) => boolean,
): Promise<StackRow | undefined> {
  const rows = await db().tables.bandStacks.findAll({
    where: own(frame, facts),
    order: [['id', 'DESC']],
    limit: MOST_LOOKED_AT,
  });
  return rows.find(({ planJson }) => isWanted(JSON.parse(planJson) as StackPlan));
}

/** What marks the rows this engine may measure from. */
const own = (frame: FrameRow, { tone }: FitFacts) => ({ frameId: frame.id, engine: ENGINE_VERSION, tone });

/** The stored bytes, if they are what their hash says; else they are made again from the frame. */
async function openStack(frame: FrameRow, facts: FitFacts, row: StackRow): Promise<StoredStack> {
  const bytes = await readObject(stackKey(row.sha256));
  if (bytes && (await sha256Of(bytes)) === row.sha256) return { sha256: row.sha256, bytes };
  log().warn(
    { frame: frame.id, stack: row.sha256 },
    bytes ? 'a band stack was damaged' : 'a band stack was gone',
  );
  const plan = JSON.parse(row.planJson) as StackPlan;
  return once(frame.id, plan, () => make(frame, facts, { tone: facts.tone, stack: plan }));
}

async function make(frame: FrameRow, facts: FitFacts, options: FitOptions): Promise<StoredStack> {
  const picture = await readObject(originalKey(frame.sha256));
  if (!picture) throw new AppError('NOT_FOUND', 'The stored bytes of this frame are gone.');
  const answer = await stackInPool(picture, facts.setup, options);
  if (!answer.ok) throw new AppError('CANNOT_FIT', answer.message);
  const bytes = answer.stack;
  const sha256 = await sha256Of(bytes);
  await putObject(stackKey(sha256), bytes, bytes.length, 'application/octet-stream');
  // Two who make the same stack at once put the same bytes; one row is enough.
  // In the order of the stack's own heading: made again from it, the bytes are the same to the last one.
  const planJson = JSON.stringify(decodeStack(bytes).plan);
  await db().tables.bandStacks.bulkCreate(
    [{ ...own(frame, facts), planJson, sha256, bytes: bytes.length, createdAt: new Date() }],
    { ignoreDuplicates: true },
  );
  return { sha256, bytes };
}

/** Stacks that are being made now, so that two who ask at once wait for one. */
const held = globalThis as { midfringeStacks?: Map<string, Promise<StoredStack>> };

async function once(
  frameId: number,
  wanted: unknown,
  work: () => Promise<StoredStack>,
): Promise<StoredStack> {
  const making = (held.midfringeStacks ??= new Map<string, Promise<StoredStack>>());
  const key = canonicalJson([frameId, wanted]);
  const running = making.get(key) ?? work().finally(() => making.delete(key));
  making.set(key, running);
  const { sha256, bytes } = await running;
  // Whoever fits from it hands its bytes over to a thread, so each gets a copy of its own.
  return { sha256, bytes: bytes.slice() };
}

/** Off this thread: some megabytes take longer than a request should wait for another. */
async function sha256Of(bytes: Uint8Array<ArrayBuffer>): Promise<string> {
  return Buffer.from(await webcrypto.subtle.digest('SHA-256', bytes)).toString('hex');
}
