import { Worker } from 'node:worker_threads';
import type { Frame } from '../recording/recording.ts';
import { FRAMES_UNDER_WAY, fromWorker, type ToWorker } from './protocol.ts';
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

/**
 * Worker threads that follow bars, one stretch each at a time. Workers start when first needed; one that dies rejects
 * what it was doing and is replaced by the next call. Close it when done, or use `await using`.
 */
export class TrackerPool {
  readonly #size: number;
  readonly #all = new Set<TrackerThread>();
  readonly #idle: TrackerThread[] = [];
  readonly #waiting: (() => void)[] = [];
  #closed = false;

  /** @throws RangeError unless `size` is a whole number of at least 1 */
  constructor(size: number) {
    if (!Number.isInteger(size) || size < 1)
      throw new RangeError(`size: expected a whole number of at least 1, got ${size}`);
    this.#size = size;
  }

  /** Thread identifiers of the workers alive. */
  get threadIds(): readonly number[] {
    return [...this.#all].map((thread) => thread.threadId);
  }

  /**
   * Follows the bar through a stretch, as `trackFrames` does, in a worker; frames' buffers move there. At most
   * `FRAMES_UNDER_WAY` frames are ahead of the worker, then `frames` waits. Rejects with the signal's reason when aborted, and with an Error
   * when the worker dies or the pool is closed. `frames` is always left properly.
   */
  async track(frames: AsyncIterable<Frame>, view: View, options: TrackOptions = {}): Promise<TrackOutcome> {
    const thread = await this.#acquire(options.signal);
    try {
      return await thread.run(frames, view, options);
    } finally {
      this.#release(thread);
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

  async #acquire(signal: AbortSignal | undefined): Promise<TrackerThread> {
    for (;;) {
      signal?.throwIfAborted();
      if (this.#closed) throw new Error('The tracking pool was closed.');
      const idle = this.#idle.pop();
      if (idle !== undefined) return idle;
      if (this.#all.size < this.#size) {
        const thread = new TrackerThread((dead) => this.#bury(dead));
        this.#all.add(thread);
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

  #release(thread: TrackerThread): void {
    if (this.#all.has(thread) && !this.#idle.includes(thread)) this.#idle.push(thread);
    this.#waiting[0]?.();
  }

  #bury(thread: TrackerThread): void {
    this.#all.delete(thread);
    const at = this.#idle.indexOf(thread);
    if (at >= 0) this.#idle.splice(at, 1);
    this.#waiting[0]?.();
  }
}

/** One worker and the jobs sent to it that it hasn't answered yet (an aborted one may linger beside the next). */
class TrackerThread {
  readonly #worker: Worker;
  readonly #jobs = new Map<number, Job>();
  readonly #onDeath: (thread: TrackerThread) => void;
  #next = 1;
  #dead: Error | null = null;

  constructor(onDeath: (thread: TrackerThread) => void) {
    this.#onDeath = onDeath;
    this.#worker = new Worker(WORKER);
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
        while (job.underWay >= FRAMES_UNDER_WAY) await this.#unlessBroken(job, this.#room(job));
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
    else this.#post({ kind: 'begin', job: job.number, view });
    return job;
  }

  #send(job: Job, frame: Frame): void {
    // Grey values that share their buffer with something else are copied, not torn away from it.
    const alone = frame.grey.byteLength === frame.grey.buffer.byteLength;
    const grey = alone ? frame.grey : frame.grey.slice();
    job.underWay++;
    this.#post({ kind: 'frame', job: job.number, frame: { ...frame, grey } }, [grey.buffer as ArrayBuffer]);
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

  #post(message: ToWorker, transfer: ArrayBuffer[] = []): void {
    if (this.#dead === null) this.#worker.postMessage(message, transfer);
  }

  #receive(raw: unknown): void {
    let message: ReturnType<typeof fromWorker>;
    try {
      message = fromWorker(raw);
    } catch (error) {
      this.#die(error);
      return;
    }
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
