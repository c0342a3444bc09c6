import { apparatusOf, followSegment, ringDownOptions } from '../../src/measuring/measure-segment.ts';
import type { MeasuredSegment } from '../../src/measuring/measured-segment.ts';
import { segmentResult } from '../../src/measuring/segment-result.ts';
import type { FfmpegTools } from '../../src/recording/find-ffmpeg.ts';
import type { Apparatus } from '../../src/reduction/apparatus.ts';
import type { Results } from '../../src/report/results.ts';
import type { SessionFile } from '../../src/session/read-session.ts';
import type { TrackerPool } from '../../src/tracking/pool.ts';
import type { ResultsState } from '../contract.ts';
import type { Calculator } from './calculator.ts';
import type { Fit } from './calculator-protocol.ts';
import { fitKey, followKey } from './keys.ts';
import type { Followed, MeasuredStore } from './measured-store.ts';
import { ResultsAssembler } from './results-assembler.ts';
import type { SegmentInput, SessionInputs } from './segment-inputs.ts';

/** A segment as measured, with what is needed to draw it. */
export interface DrawnSegment {
  readonly measured: MeasuredSegment;
  readonly fit: Fit;
}

/** What measuring in the background needs from the outside. */
export interface MeasuringKit {
  readonly tools: () => Promise<FfmpegTools>;
  readonly pool: TrackerPool;
  readonly fits: Calculator;
  readonly reductions: Calculator;
  readonly store: MeasuredStore;
  /** Most segments that are followed at once. */
  readonly cores: number;
  /** Told when the state has changed; not more often than every `TELL_EVERY_MS` while a segment is followed. */
  readonly changed: () => void;
  readonly report: (error: unknown) => void;
}

/** The session as it stands: its file and what can be measured of it. */
export interface MeasuringTask {
  readonly revision: number;
  /** The same for all states of one document. */
  readonly document: object;
  readonly file: SessionFile;
  readonly inputs: SessionInputs;
}

interface Wanted extends SegmentInput {
  readonly apparatus: Apparatus | undefined;
  readonly follow: string;
  readonly fit: string;
}

const SETTLE_MS = 400;
const TELL_EVERY_MS = 250;

/**
 * Keeps the results up to the session: measures the segments that changed, through the very functions of the command line, once the user pauses. What was
 * measured before is taken from the store, so undo is free.
 */
export class Measuring {
  readonly #kit: MeasuringKit;
  #task: MeasuringTask | null = null;
  #wanted: readonly Wanted[] = [];
  #tools: FfmpegTools | null = null;
  readonly #shown = new Map<string, DrawnSegment>();
  readonly #failed = new Map<string, string>();
  readonly #running = new Map<string, AbortController>();
  readonly #work = new Set<Promise<void>>();
  readonly #assembler: ResultsAssembler;
  #measuring: { segment: string; share: number } | null = null;
  #settle: NodeJS.Timeout | undefined;
  #told_ms = 0;
  #held = false;
  #closed = false;
  readonly #waiters = new Set<() => void>();

  constructor(kit: MeasuringKit) {
    this.#kit = kit;
    this.#assembler = new ResultsAssembler(kit.reductions, () => this.#tell(), kit.report);
  }

  /** Takes a changed session. Begins when nothing has changed for a moment. @param another a different document: nothing of the last one is shown. */
  async update(task: MeasuringTask | null, another: boolean): Promise<void> {
    this.#task = task;
    if (another) this.#shown.clear();
    this.#tools ??= task ? await this.#kit.tools() : null;
    if (this.#task !== task || this.#closed) return;
    this.#wanted = task && this.#tools ? wanted(task, this.#tools.version.text) : [];
    const follows = new Set(this.#wanted.map((w) => w.follow));
    for (const [key, abort] of this.#running) if (!follows.has(key)) abort.abort();
    for (const key of this.#failed.keys()) if (!follows.has(key)) this.#failed.delete(key);
    clearTimeout(this.#settle);
    this.#settle = setTimeout(() => this.#advance(), SETTLE_MS);
    // What was measured before (undo) is there at once.
    for (const w of this.#wanted) this.#show(w);
    this.#assemble();
    this.#tell();
  }

  /** Holds measuring back while the user waits for something else, or lets it go on. A segment under way is begun again later. */
  hold(held: boolean): void {
    this.#held = held;
    if (!held) this.#advance();
    else for (const abort of this.#running.values()) abort.abort();
  }

  /** The results as they stand; `results` null where nothing is open. */
  state(): ResultsState {
    const pending = this.#pending();
    const revision = this.#task?.revision ?? 0;
    const problems = [...(this.#task?.inputs.problems ?? [])];
    for (const w of this.#wanted) {
      const message = this.#failed.get(w.follow);
      if (message !== undefined) problems.push({ segment: w.segment.id, message });
    }
    return {
      revision,
      results: this.results(),
      pending,
      stale: pending.filter((id) => this.#shown.has(id)),
      problems,
      measuring: this.#measuring,
    };
  }

  /** The results file's object over what has been measured so far; up to date when `settled`. */
  results(): Results | null {
    return this.#task && this.#assembler.results(this.#task.document);
  }

  /** The segments of the session that have been measured, those included whose measurement is of an earlier edit. */
  current(): ReadonlyMap<string, DrawnSegment> {
    const current = new Map<string, DrawnSegment>();
    for (const segment of this.#task?.file.session.segments ?? []) {
      const drawn = this.#shown.get(segment.id);
      if (!drawn) continue;
      const { current_A, u_current_A = 0, sweep = null, left_out = null, note = '' } = segment;
      const result = { ...drawn.measured.result, current_A, u_current_A, sweep, left_out, note };
      current.set(segment.id, { ...drawn, measured: { ...drawn.measured, result } });
    }
    return current;
  }

  /** Settles when everything that can be measured is. Rejects with the signal's reason when it aborts. */
  async settled(signal: AbortSignal): Promise<void> {
    if (!this.#isSettled()) {
      await new Promise<void>((resolve) => {
        const go = () => {
          signal.removeEventListener('abort', go);
          this.#waiters.delete(go);
          resolve();
        };
        this.#waiters.add(go);
        signal.addEventListener('abort', go, { once: true });
        // Somebody waits now: with all there is.
        this.#advance();
      });
    }
    signal.throwIfAborted();
  }

  /** Stops; nothing is left running when it settles. */
  async close(): Promise<void> {
    this.#closed = true;
    clearTimeout(this.#settle);
    for (const abort of this.#running.values()) abort.abort();
    await Promise.allSettled([...this.#work, this.#assembler.close()]);
    this.#wake();
  }

  #pending(): string[] {
    const waiting = this.#wanted.filter((w) => !this.#kit.store.fit(w.fit) && !this.#failed.has(w.follow));
    return [...waiting.map((w) => w.segment.id), ...(this.#task?.inputs.opening ?? [])];
  }

  #advance(): void {
    if (this.#closed) return;
    const isNew = this.#wanted.filter((w) => this.#show(w));
    if (isNew.length > 0) this.#assemble();
    // One core is left for the pictures and fits that the user looks at meanwhile, unless the user waits for the results.
    const atOnce = this.#waiters.size > 0 ? this.#kit.cores : Math.max(1, this.#kit.cores - 1);
    for (const w of this.#wanted) {
      if (this.#held || this.#running.size >= atOnce) break;
      if (this.#running.has(w.follow) || this.#failed.has(w.follow) || this.#kit.store.fit(w.fit)) continue;
      this.#begin(w);
    }
    this.#tell();
  }

  #begin(w: Wanted): void {
    const abort = new AbortController();
    this.#running.set(w.follow, abort);
    const work = this.#measure(w, abort.signal)
      .catch((error: unknown) => {
        if (abort.signal.aborted) return;
        this.#kit.report(error);
        this.#failed.set(w.follow, `Segment ${w.segment.id} could not be measured: the program failed at it.`);
      })
      .finally(() => {
        this.#running.delete(w.follow);
        this.#work.delete(work);
        if (this.#measuring?.segment === w.segment.id) this.#measuring = null;
        this.#advance();
      });
    this.#work.add(work);
  }

  async #measure(w: Wanted, signal: AbortSignal): Promise<void> {
    const { store, fits } = this.#kit;
    const followed = (await store.findFollowed(w.follow)) ?? (await this.#follow(w, signal));
    const { outcome } = followed;
    const options = ringDownOptions(w.view, w.opened);
    const fit = await fits.do({ kind: 'fit', outcome, options, apparatus: w.apparatus }, null, signal);
    store.putFit(w.fit, fit);
  }

  async #follow(w: Wanted, signal: AbortSignal): Promise<Followed> {
    const { segment, view, opened } = w;
    const length_s = segment.end_s - segment.start_s;
    const tools = await this.#kit.tools();
    const onFrames = (_frames: number, upTo_s: number) => {
      this.#measuring = { segment: segment.id, share: Math.min(1, Math.max(0, (upTo_s - segment.start_s) / length_s)) };
      if (performance.now() - this.#told_ms > TELL_EVERY_MS) this.#tell();
    };
    const followed = await followSegment(segment, view, opened, { tools, pool: this.#kit.pool, signal, onFrames });
    await this.#kit.store.putFollowed(w.follow, followed);
    return followed;
  }

  /** Takes a segment's result over from the store. @returns whether it is new. */
  #show(w: Wanted): boolean {
    const { store } = this.#kit;
    const fit = store.fit(w.fit);
    const followed = store.followed(w.follow);
    const { segment, view, opened } = w;
    const shown = this.#shown.get(segment.id);
    const names = (r: { recording: string; view: string }) => `${r.recording} ${r.view}`;
    const isShown = shown?.fit === fit && names(shown.measured.result) === names(segment);
    if (!fit || !followed || isShown) return false;
    const measured = segmentResult({ segment, view, opened, ...followed, ringDown: fit.ringDown, checks: fit.checks });
    this.#shown.set(segment.id, { measured, fit });
    return true;
  }

  #assemble(): void {
    const [task, tools] = [this.#task, this.#tools];
    if (!task || !tools) return;
    const { file, document, inputs } = task;
    const rows = [...this.current().values()].map((drawn) => drawn.measured.result);
    this.#assembler.want({ document, file, recordings: inputs.recordings, rows, tools });
  }

  #isSettled(): boolean {
    return this.#closed || (this.#pending().length === 0 && this.#assembler.isCurrent);
  }

  #tell(): void {
    this.#told_ms = performance.now();
    this.#kit.changed();
    if (this.#isSettled()) this.#wake();
  }

  #wake(): void {
    for (const wake of [...this.#waiters]) wake();
  }
}

function wanted(task: MeasuringTask, ffmpeg: string): Wanted[] {
  return task.inputs.inputs.map((input) => {
    const apparatus = apparatusOf(task.file.session, input.segment);
    const follow = followKey(input.segment, input.view, input.opened, ffmpeg);
    const fit = fitKey(follow, input.view, input.opened, apparatus);
    return { ...input, apparatus, follow, fit };
  });
}
