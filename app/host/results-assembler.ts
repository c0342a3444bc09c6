import type { SessionRecordings } from '../../src/measuring/open-recordings.ts';
import type { Results } from '../../src/report/results.ts';
import type { Calculator } from './calculator.ts';
import type { ResultsTask } from './calculator-protocol.ts';

/** What the results are made from; `document` is the same for all states of one document. */
export type ResultsWish = Omit<ResultsTask, 'kind'> & { readonly document: object };

/** Keeps the results file's object up to what was wanted last, calculated in a thread of its own. */
export class ResultsAssembler {
  readonly #calculator: Calculator;
  readonly #changed: () => void;
  readonly #report: (error: unknown) => void;
  #made: { readonly document: object; readonly results: Results } | null = null;
  #wish: ResultsWish | null = null;
  #work: Promise<void> | null = null;
  #closed = false;

  /** @param changed told when the results have changed, or can't be made. */
  constructor(calculator: Calculator, changed: () => void, report: (error: unknown) => void) {
    this.#calculator = calculator;
    this.#changed = changed;
    this.#report = report;
  }

  /** Whether the results are those of the last wish. */
  get isCurrent(): boolean {
    return this.#work === null;
  }

  /** The results of a document as made last; null: none yet. */
  results(document: object): Results | null {
    return this.#made?.document === document ? this.#made.results : null;
  }

  /** Makes the results anew. Of wishes that come while others are worked on only the last one is done. */
  want(wish: ResultsWish): void {
    this.#wish = wish;
    this.#work ??= this.#run().finally(() => {
      this.#work = null;
      this.#changed();
    });
  }

  /** Stops; settles when nothing runs any more. */
  async close(): Promise<void> {
    this.#closed = true;
    this.#wish = null;
    await this.#work;
  }

  async #run(): Promise<void> {
    for (let wish = this.#take(); wish; wish = this.#take()) {
      const { document, ...task } = wish;
      try {
        const recordings = withoutTicks(task.recordings);
        const results = await this.#calculator.do({ ...task, recordings, kind: 'results' }, null);
        this.#made = { document, results };
      } catch (error) {
        if (!this.#closed) this.#report(error);
      }
    }
  }

  #take(): ResultsWish | null {
    const wish = this.#wish;
    this.#wish = null;
    return wish;
  }
}

/** What the results need of the recordings: their facts, not the times of all their frames. */
function withoutTicks(recordings: SessionRecordings): SessionRecordings {
  const none = { ticks: new Float64Array(), keyframes: new Uint32Array() };
  return new Map([...recordings].map(([id, o]) => [id, { ...o, recording: { ...o.recording, ...none } }]));
}
