import { Worker } from 'node:worker_threads';
import type { CalculatorAnswer, CalculatorRequest, CalculatorTask, CalculatorYield } from './calculator-protocol.ts';

/** The worker's compiled module: beside this one, or, where this one runs from its source, in the build. */
const WORKER = new URL(
  import.meta.url.endsWith('.ts') ? '../../dist/app/host/calculator-worker.js' : './calculator-worker.js',
  import.meta.url,
);

interface Waiting {
  readonly request: CalculatorRequest;
  /** Requests of one lane supersede each other; null: never superseded. */
  readonly lane: string | null;
  settle(value: unknown): void;
  fail(error: unknown): void;
}

/** A newer request of the same lane took this one's place. */
export class Superseded extends Error {
  override readonly name = 'AbortError';
}

/** One worker thread that calculates, a request at a time. It starts when first needed; when it dies the next request starts another. */
export class Calculator {
  #worker: Worker | null = null;
  #running: Waiting | null = null;
  readonly #waiting: Waiting[] = [];
  #next = 1;
  #closed = false;

  /**
   * Does one task.
   * @param lane a newer request with the same lane takes the place of one that hasn't begun; null: all are done.
   * Rejects with the signal's reason, with `Superseded`, or with an Error when the thread dies or is closed.
   */
  do<T extends CalculatorTask>(
    task: T,
    lane: string | null,
    signal?: AbortSignal,
  ): Promise<CalculatorYield[T['kind']]> {
    if (this.#closed) return Promise.reject(new Error('The calculating thread was closed.'));
    if (signal?.aborted) return Promise.reject(signal.reason);
    return new Promise<CalculatorYield[T['kind']]>((resolve, reject) => {
      const onAbort = () => job.fail(signal?.reason);
      const job: Waiting = {
        request: { number: this.#next++, task },
        lane,
        settle: (value) => {
          signal?.removeEventListener('abort', onAbort);
          resolve(value as CalculatorYield[T['kind']]);
        },
        fail: (error) => {
          signal?.removeEventListener('abort', onAbort);
          this.#forget(job);
          reject(error);
        },
      };
      signal?.addEventListener('abort', onAbort, { once: true });
      if (lane !== null) {
        for (const older of this.#waiting.filter((w) => w.lane === lane)) older.fail(new Superseded('superseded'));
        // Somebody drags and waits: before whatever is done in the background.
        this.#waiting.unshift(job);
      } else this.#waiting.push(job);
      this.#advance();
    });
  }

  /** Ends the thread; requests reject. Safe to call twice. */
  async close(): Promise<void> {
    this.#closed = true;
    this.#failAll(new Error('The calculating thread was closed.'));
    const worker = this.#worker;
    this.#worker = null;
    await worker?.terminate();
  }

  #advance(): void {
    if (this.#running || this.#closed) return;
    const next = this.#waiting.shift();
    if (!next) return;
    this.#running = next;
    this.#worker ??= this.#start();
    this.#worker.postMessage(next.request);
  }

  #start(): Worker {
    const worker = new Worker(WORKER);
    const die = (why: string) => {
      if (this.#worker !== worker) return;
      this.#worker = null;
      this.#failAll(new Error(`The calculating thread has died: ${why}`));
    };
    worker.on('message', (answer: CalculatorAnswer) => this.#receive(answer));
    worker.on('messageerror', (error) => die(error.message));
    worker.on('error', (error) => die(error instanceof Error ? error.message : String(error)));
    worker.on('exit', (code) => die(`exit code ${code}`));
    return worker;
  }

  #receive(answer: CalculatorAnswer): void {
    const job = this.#running;
    if (!job || job.request.number !== answer.number) return;
    this.#running = null;
    if (answer.ok) job.settle(answer.value);
    else job.fail(new Error(answer.message));
    this.#advance();
  }

  #forget(job: Waiting): void {
    // One that runs goes on to its end, unheard: a calculation is short.
    const at = this.#waiting.indexOf(job);
    if (at >= 0) this.#waiting.splice(at, 1);
  }

  #failAll(error: Error): void {
    const jobs = [...(this.#running ? [this.#running] : []), ...this.#waiting];
    this.#running = null;
    for (const job of jobs) job.fail(error);
  }
}
