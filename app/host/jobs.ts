import { hostError } from './serve-window.ts';

/** Kinds of long work that the window starts. */
export type JobKind = 'follow' | 'filmStrip' | 'play';

interface RunningJob {
  readonly job: string;
  readonly kind: JobKind;
  readonly view: string | null;
  readonly abort: AbortController;
  readonly done: Promise<void>;
}

/** How a job ended: null where it went well. */
export type JobEnd = { readonly reason: string; readonly message: string } | null;

/** Long work under way: named, cancelled by name, told of when it ends. */
export class Jobs {
  readonly #running = new Map<string, RunningJob>();
  readonly #report: (error: unknown) => void;
  #next = 1;

  constructor(report: (error: unknown) => void) {
    this.#report = report;
  }

  /**
   * Starts a job.
   * @param owner its abort cancels the job; null: the job outlives the window that asked for it.
   * @param ended called once.
   * @returns its name.
   */
  start(
    kind: JobKind,
    view: string | null,
    owner: AbortSignal | null,
    run: (job: string, signal: AbortSignal) => Promise<void>,
    ended: (job: string, error: JobEnd) => void,
  ): string {
    const job = `${kind}-${this.#next++}`;
    const abort = new AbortController();
    const cancel = () => abort.abort();
    if (owner?.aborted) cancel();
    owner?.addEventListener('abort', cancel, { once: true });
    // Begins after the answer with its name is on its way, so that no event comes before that.
    const begun = new Promise<void>((resolve) => setImmediate(resolve)).then(() => run(job, abort.signal));
    const done = begun
      .then(
        () => null,
        (error: unknown): JobEnd => {
          if (abort.signal.aborted) return { reason: 'cancelled', message: 'Stopped.' };
          const seen = hostError(error);
          if (seen.reason === 'internal') this.#report(error);
          return seen;
        },
      )
      .then((error) => {
        owner?.removeEventListener('abort', cancel);
        this.#running.delete(job);
        ended(job, error);
      });
    this.#running.set(job, { job, kind, view, abort, done });
    return job;
  }

  /** Cancels a job; one that has ended already is no error. */
  cancel(job: string): void {
    this.#running.get(job)?.abort.abort();
  }

  /** What runs. */
  list(): { job: string; kind: JobKind; view: string | null }[] {
    return [...this.#running.values()].map(({ job, kind, view }) => ({ job, kind, view }));
  }

  /** Whether a job of this kind runs. */
  runs(kind: JobKind): boolean {
    return this.list().some((job) => job.kind === kind);
  }

  /** Cancels all, or all of a kind, and waits for their ends. */
  async cancelAll(kind?: JobKind): Promise<void> {
    const chosen = [...this.#running.values()].filter((job) => kind === undefined || job.kind === kind);
    for (const job of chosen) job.abort.abort();
    await Promise.all(chosen.map((job) => job.done));
  }
}
