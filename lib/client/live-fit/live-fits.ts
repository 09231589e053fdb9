import type { FitFacts, FitPreview, RegionChange, ServerFit } from '@/lib/domain/views';
import { isScanRegion } from '@/lib/domain/scan-result';
import { stackCovers, type FrameStack } from '@/lib/measure/band-stack';
import { decodeStack } from '@/lib/measure/stack-file';
import type { FitQuestion, FitReply } from './fit-worker';
import { Refused, type SentStack } from './stacks';

/** Where the numbers of a change come from just now; null where none are asked for yet. */
export type FitHome = 'loading' | 'browser' | 'making' | 'server' | null;

export interface FitState {
  home: FitHome;
  /** Why the browser does not fit by itself. */
  because: string | null;
  /** The newest answer: a fit or why there is none, and the change it answers. */
  change: RegionChange | null;
  fit: FitPreview | null;
  problem: string | null;
  /** Hash of the stack the answer was measured from. */
  stackSha256: string | null;
}

/** What it takes of a Worker. */
export interface FitWorker {
  postMessage: (question: FitQuestion, transfer: Transferable[]) => void;
  terminate: () => void;
}

/** What it needs of the page; a test gives its own. */
export interface FitServices {
  startWorker: (onReply: (reply: FitReply) => void, onBroken: () => void) => FitWorker;
  fetchStack: (signal: AbortSignal) => Promise<SentStack>;
  makeStack: (change: RegionChange, signal: AbortSignal) => Promise<SentStack>;
  fitOnServer: (change: RegionChange, stackSha256: string | null, signal: AbortSignal) => Promise<ServerFit>;
}

/** A drag rests this long before the server is asked for anything. */
export const REST_MS = 200;
const NO_WORKER = 'This browser cannot fit; the server does';
const BROKE_OFF = 'The fit here broke off; the server fits';

const NOTHING: FitState = {
  home: null,
  because: null,
  change: null,
  fit: null,
  problem: null,
  stackSha256: null,
};

interface Held extends Pick<FrameStack, 'plan' | 'picture'> {
  sha256: string;
  /** The change it was made for, if it was made on this page. */
  madeFor: RegionChange | null;
}

/**
 * The fits of one frame while a person changes its region. A worker of this browser answers from the band stack at hand;
 * only the newest change counts, and one question is on its way at a time. A region the stack does not hold first gets
 * a new stack from the server. Where there is no worker, the server fits.
 */
export class LiveFits {
  private state: FitState = NOTHING;
  private readonly listeners = new Set<() => void>();
  private worker: FitWorker | null = null;
  private held: Held | null = null;
  private wanted: RegionChange | null = null;
  /** The change the worker has in hand. */
  private asked: { change: RegionChange; sha256: string } | null = null;
  /** What the server was asked for last: the reading's stack, a new one, or a fit. */
  private errand: { abort: AbortController; change: RegionChange | null } | null = null;

  constructor(
    private readonly services: FitServices,
    private readonly facts: FitFacts,
    private readonly hasReading: boolean,
  ) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  readonly current = (): FitState => this.state;

  /** Starts the worker and fetches the stack of the reading that is shown. */
  open(isScan = false): void {
    if (isScan) {
      this.turnToServer('The server fits scans');
      return;
    }
    try {
      this.worker = this.services.startWorker(
        (reply) => this.hear(reply),
        () => this.turnToServer(NO_WORKER),
      );
    } catch {
      // Whatever a browser throws here, it means that it starts no worker; the page says so.
      this.turnToServer(NO_WORKER);
      return;
    }
    if (this.hasReading) this.fetch();
  }

  close(): void {
    this.errand?.abort.abort();
    this.worker?.terminate();
    this.errand = null;
    this.worker = null;
    this.held = null;
    this.asked = null;
    this.state = NOTHING;
  }

  /** The change to fit now; null when nothing is changed. */
  want(change: RegionChange | null): void {
    this.wanted = change;
    if (change === null) this.tell({ change: null, fit: null, problem: null, stackSha256: null });
    this.go();
  }

  private tell(part: Partial<FitState>): void {
    this.state = { ...this.state, ...part };
    for (const listener of this.listeners) listener();
  }

  /** Does whatever the newest change needs next, if nothing for it is under way. */
  private go(): void {
    const { wanted } = this;
    if (wanted === null || wanted === this.state.change) return;
    if (this.state.home === 'server') {
      this.askServer(wanted);
    } else if (this.held && holds(this.held, wanted)) {
      this.stopMaking();
      this.askWorker(wanted, this.held.sha256);
    } else if (this.state.home !== 'loading') {
      this.askForStack(wanted);
    }
  }

  private askWorker(change: RegionChange, sha256: string): void {
    if (this.asked || !this.worker) return;
    this.asked = { change, sha256 };
    this.worker.postMessage({ kind: 'fit', change }, []);
  }

  private hear(reply: FitReply): void {
    const { asked } = this;
    this.asked = null;
    if (reply.kind === 'broken') {
      this.turnToServer(BROKE_OFF);
      return;
    }
    // An answer to an older change is shown until the next one comes; one to a dropped change is not.
    if (this.wanted === null || asked === null) return;
    const answered = { change: asked.change, stackSha256: asked.sha256 };
    if (reply.kind === 'fit') this.tell({ ...answered, fit: reply.fit, problem: null });
    else this.tell({ ...answered, fit: null, problem: reply.message });
    this.go();
  }

  private fetch(): void {
    this.tell({ home: 'loading' });
    void this.run(null, 0, async (signal) => {
      const sent = await this.services.fetchStack(signal).catch(() => null);
      // Without the reading's stack the first change gets one of its own, or says why there is none.
      if (sent) this.take(sent, null);
      else if (!signal.aborted) this.tell({ home: null });
    });
  }

  private askForStack(change: RegionChange): void {
    this.tell({ home: 'making' });
    void this.run(change, REST_MS, async (signal) => {
      this.take(await this.services.makeStack(change, signal), change);
    });
  }

  private askServer(change: RegionChange): void {
    void this.run(change, REST_MS, async (signal) => {
      const { stackSha256, ...fit } = await this.services.fitOnServer(change, this.state.stackSha256, signal);
      this.tell({ change, fit, problem: null, stackSha256 });
    });
  }

  /** One errand to the server at a time: a newer one takes the place of the one under way. */
  private async run(
    change: RegionChange | null,
    restMs: number,
    work: (signal: AbortSignal) => Promise<void>,
  ): Promise<void> {
    if (this.errand && this.errand.change === change) return;
    this.errand?.abort.abort();
    const errand = { abort: new AbortController(), change };
    this.errand = errand;
    const { signal } = errand.abort;
    try {
      await rest(restMs);
      if (!signal.aborted) await work(signal);
    } catch (problem) {
      if (signal.aborted) return;
      const message = problem instanceof Refused ? problem.message : 'The fit could not be made. Try again.';
      const home = this.state.home === 'server' ? 'server' : this.restingHome();
      this.tell({ home, change, fit: null, problem: message });
    } finally {
      if (this.errand === errand) this.errand = null;
    }
    if (!signal.aborted) this.go();
  }

  private take({ sha256, bytes }: SentStack, madeFor: RegionChange | null): void {
    if (!this.worker) return;
    const { plan, picture } = decodeStack(new Uint8Array(bytes));
    this.held = { plan, picture, sha256, madeFor };
    this.worker.postMessage({ kind: 'hold', bytes, facts: this.facts }, [bytes]);
    this.tell({ home: 'browser' });
  }

  /** The region came back to what the stack at hand holds before a new one was there. */
  private stopMaking(): void {
    if (this.state.home !== 'making') return;
    this.errand?.abort.abort();
    this.errand = null;
    this.tell({ home: 'browser' });
  }

  private restingHome(): FitHome {
    return this.held ? 'browser' : null;
  }

  private turnToServer(because: string): void {
    this.worker?.terminate();
    this.worker = null;
    this.held = null;
    this.asked = null;
    this.errand?.abort.abort();
    this.errand = null;
    this.tell({ home: 'server', because, stackSha256: null });
    this.go();
  }
}

/** What was made for a region is good for it, whatever its edges were rounded to. */
function holds(held: Held, change: RegionChange): boolean {
  if (isScanRegion(change.region)) return false;
  return held.madeFor === change || stackCovers(held, change.region);
}

const rest = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));
