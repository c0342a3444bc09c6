import { Worker } from 'node:worker_threads';
import type { Frame } from '../recording/recording.ts';
import { PictureSlots } from './picture-slots.ts';
import { framesUnderWay, fromWorker, type ToWorker } from './protocol.ts';
import type { TrackOutcome, View } from './trace.ts';
import type { TrackOptions } from './track.ts';

/** The worker's compiled module: beside this one, or, where this one runs from its source, in the build. */
const WORKER = new URL(
  import.meta.url.endsWith('.ts') ? '../../dist/src/tracking/worker.js' : './worker.js',
  import.meta.url,
);

/** One stretch being followed. */
interface Job {
  readonly number: number;
  readonly options: TrackOptions;
  readonly outcome: Promise<TrackOutcome>;
  readonly settle: (outcome: TrackOutcome) => void;
  readonly fail: (error: unknown) => void;
  underWay: number;
  taken: number;
  /** Called when the worker has taken frames, or the job is over. */
  wake: (() => void) | null;
  /** Rejects what the feeding of frames waits for; the reason once the job has failed. */
  break: ((reason: unknown) => void) | null;
  broken: { readonly reason: unknown } | null;
}

/** What a worker holds for long are pictures in shared memory; room for what is soon thrown away would only grow with the recording's length. */
const YOUNG_MB = 8;

/** Stretches that one worker follows at once: following takes far less time than decoding, and learning a bar goes faster in a thread that has done it before. */
const JOBS_A_THREAD = 2;

/**
 * Worker threads that follow bars, two stretches each at a time. Workers start when first needed; one that dies rejects
 * what it was doing and is replaced by the next call. Close it when done, or use `await using`.
 */
export class TrackerPool {
  readonly #size: number;
  readonly #all = new Set<TrackerThread>();
  readonly #waiting: (() => void)[] = [];
  #closed = false;

  /** @param size most threads. @throws RangeError unless it is a whole number of at least 1 */
  constructor(size: number) {
    if (!Number.isInteger(size) || size < 1)
      throw new RangeError(`size: expected a whole number of at least 1, got ${size}`);
    this.#size = size;
  }

  /** Thread identifiers of the workers alive. */
  get threadIds(): readonly number[] {
    return [...this.#all].map((thread) => thread.threadId);
  }

  /** Starts a first worker before it is needed: it loads while its frames are still to be had. */
  prepare(): void {
    if (!this.#closed && this.#all.size === 0) this.#start();
  }

  /**
   * Follows the bar through a stretch, as `trackFrames` does, in a worker; every frame's grey values are copied before
   * the next one is asked for. At most `framesUnderWay` frames are ahead of the worker, then `frames` waits. Rejects with the signal's
   * reason when aborted, and with an Error when the worker dies or the pool is closed. `frames` is always left properly.
   */
  async track(frames: AsyncIterable<Frame>, view: View, options: TrackOptions = {}): Promise<TrackOutcome> {
    const thread = await this.#acquire(options.signal);
    try {
      return await thread.run(frames, view, options);
    } finally {
      thread.places++;
      this.#waiting[0]?.();
    }
  }

  /** Ends all workers; what is being followed rejects. Safe to call twice. */
  async close(): Promise<void> {
    this.#closed = true;
    for (const wake of this.#waiting.splice(0)) wake();
    await Promise.all([...this.#all].map((thread) => thread.end('The tracking pool was closed.')));
  }

  /** Same as `close`. */
  [Symbol.asyncDispose](): Promise<void> {
    return this.close();
  }

  /** A thread with a place for one more stretch, which is taken. */
  async #acquire(signal: AbortSignal | undefined): Promise<TrackerThread> {
    for (;;) {
      signal?.throwIfAborted();
      if (this.#closed) throw new Error('The tracking pool was closed.');
      const thread = this.#freest();
      if (thread !== null) {
        thread.places--;
        return thread;
      }
      await new Promise<void>((resolve) => {
        const wake = () => {
          signal?.removeEventListener('abort', wake);
          const at = this.#waiting.indexOf(wake);
          if (at >= 0) this.#waiting.splice(at, 1);
          resolve();
        };
        this.#waiting.push(wake);
        signal?.addEventListener('abort', wake);
      });
    }
  }

  /** An idle thread, else a new one, else one with a place left; null where there is none. */
  #freest(): TrackerThread | null {
    const [best] = [...this.#all].sort((a, b) => b.places - a.places);
    if (best?.places === JOBS_A_THREAD) return best;
    if (this.#all.size < this.#size) return this.#start();
    return best !== undefined && best.places > 0 ? best : null;
  }

  #start(): TrackerThread {
    const thread = new TrackerThread((dead) => this.#bury(dead));
    this.#all.add(thread);
    return thread;
  }

  #bury(thread: TrackerThread): void {
    this.#all.delete(thread);
    this.#waiting[0]?.();
  }
}

/** One worker and the jobs sent to it that it hasn't answered yet (an aborted one may linger beside the next). */
class TrackerThread {
  readonly #worker: Worker;
  readonly #jobs = new Map<number, Job>();
  readonly #onDeath: (thread: TrackerThread) => void;
  readonly #slots = new PictureSlots();
  /** Stretches that it could follow beside those it does. */
  places = JOBS_A_THREAD;
  #next = 1;
  #dead: Error | null = null;

  constructor(onDeath: (thread: TrackerThread) => void) {
    this.#onDeath = onDeath;
    this.#worker = new Worker(WORKER, { resourceLimits: { maxYoungGenerationSizeMb: YOUNG_MB } });
    this.#worker.on('message', (raw: unknown) => this.#receive(raw));
    this.#worker.on('messageerror', (error) => this.#die(error));
    this.#worker.on('error', (error) => this.#die(error));
    this.#worker.on('exit', (code) => this.#die(new Error(`exit code ${code}`)));
  }

  get threadId(): number {
    return this.#worker.threadId;
  }

  async run(frames: AsyncIterable<Frame>, view: View, options: TrackOptions): Promise<TrackOutcome> {
    const job = this.#begin(view, options);
    const onAbort = () => {
      this.#post({ kind: 'abort', job: job.number });
      job.fail(options.signal?.reason);
    };
    options.signal?.addEventListener('abort', onAbort, { once: true });
    const iterator = frames[Symbol.asyncIterator]();
    try {
      for (;;) {
        const next = await this.#unlessBroken(job, iterator.next());
        if (next.done === true) break;
        this.#send(job, next.value);
        const most = framesUnderWay(next.value.grey.byteLength);
        while (job.underWay >= most) await this.#unlessBroken(job, this.#room(job));
      }
      this.#post({ kind: 'end', job: job.number });
      return await job.outcome;
    } catch (error) {
      this.#post({ kind: 'abort', job: job.number });
      throw error;
    } finally {
      options.signal?.removeEventListener('abort', onAbort);
      await iterator.return?.();
    }
  }

  /** Ends the worker; its jobs reject with the sentence. */
  async end(sentence: string): Promise<void> {
    this.#fail(new Error(sentence));
    await this.#worker.terminate();
  }

  #begin(view: View, options: TrackOptions): Job {
    let settle: Job['settle'] = () => {};
    let fail: Job['fail'] = () => {};
    const outcome = new Promise<TrackOutcome>((resolve, reject) => {
      settle = resolve;
      fail = reject;
    });
    // Whoever waits for it hears of a failure; nobody may be waiting yet.
    outcome.catch(() => {});
    const job: Job = {
      number: this.#next++,
      options,
      outcome,
      settle,
      fail: (reason) => {
        job.broken ??= { reason };
        fail(reason);
        job.break?.(reason);
      },
      underWay: 0,
      taken: 0,
      wake: null,
      break: null,
      broken: null,
    };
    this.#jobs.set(job.number, job);
    if (this.#dead !== null) job.fail(this.#dead);
    else {
      const { width, height } = view.region;
      const forget = this.#slots.fits(width * height) ? [] : this.#slots.giveUpFree();
      this.#post({ kind: 'begin', job: job.number, view, forget });
    }
    return job;
  }

  #send(job: Job, { grey, ...frame }: Frame): void {
    job.underWay++;
    this.#post({ kind: 'frame', job: job.number, frame, grey: this.#slots.fill(grey) });
  }

  /** What is waited for, or the job's failure, if that comes first. (A race against the outcome would keep a handler per frame.) */
  #unlessBroken<T>(job: Job, waited: Promise<T>): Promise<T> {
    return new Promise((resolve, reject) => {
      job.break = reject;
      if (job.broken !== null) reject(job.broken.reason);
      waited.then(resolve, reject);
    });
  }

  #room(job: Job): Promise<void> {
    return new Promise((resolve) => {
      job.wake = resolve;
    });
  }

  #post(message: ToWorker): void {
    if (this.#dead === null) this.#worker.postMessage(message);
  }

  #receive(raw: unknown): void {
    let message: ReturnType<typeof fromWorker>;
    try {
      message = fromWorker(raw);
    } catch (error) {
      this.#die(error);
      return;
    }
    if (message.kind !== 'poses') this.#slots.takeBack(message.slots);
    const job = this.#jobs.get(message.job);
    if (job === undefined) return;
    switch (message.kind) {
      case 'taken':
        job.underWay -= message.frames;
        job.taken += message.frames;
        job.options.onProgress?.(job.taken);
        job.wake?.();
        break;
      case 'poses':
        job.options.onPoses?.(message.poses);
        break;
      case 'done':
        this.#jobs.delete(job.number);
        job.settle(message.outcome);
        break;
      case 'failed':
        this.#jobs.delete(job.number);
        job.fail(new Error(`Following the bar failed: ${message.message}`));
        break;
    }
  }

  #fail(error: Error): void {
    this.#dead ??= error;
    for (const job of this.#jobs.values()) {
      job.fail(error);
      job.wake?.();
    }
    this.#jobs.clear();
  }

  #die(cause: unknown): void {
    const why = cause instanceof Error ? cause.message : String(cause);
    this.#fail(new Error(`The thread that follows the bar has died: ${why}`));
    this.#onDeath(this);
    void this.#worker.terminate();
  }
}
