/** One state of the document and what led to it. */
interface Step<T> {
  readonly state: T;
  readonly label: string;
  readonly merge: string | null;
}

const MOST_STEPS = 500;

/** Undo and redo over whole states. States are never changed, only replaced. */
export class History<T> {
  #past: Step<T>[];
  #future: Step<T>[] = [];

  constructor(initial: T) {
    this.#past = [{ state: initial, label: '', merge: null }];
  }

  get state(): T {
    return (this.#past.at(-1) as Step<T>).state;
  }
  /** What undo would take back, null: nothing. */
  get undoLabel(): string | null {
    return this.#past.length > 1 ? (this.#past.at(-1)?.label ?? null) : null;
  }
  /** What redo would do again, null: nothing. */
  get redoLabel(): string | null {
    return this.#future.at(-1)?.label ?? null;
  }

  /** Replaces the state. Steps in a row with the same `merge` (not null) become one. */
  push(state: T, label: string, merge: string | null): void {
    const last = this.#past.at(-1);
    const joins = merge !== null && last?.merge === merge && this.#past.length > 1 && this.#future.length === 0;
    if (joins) this.#past.pop();
    this.#past.push({ state, label, merge });
    if (this.#past.length > MOST_STEPS) this.#past.shift();
    this.#future = [];
  }

  /** @returns false where there was nothing to undo. */
  undo(): boolean {
    if (this.#past.length < 2) return false;
    this.#future.push(this.#past.pop() as Step<T>);
    return true;
  }

  /** @returns false where there was nothing to redo. */
  redo(): boolean {
    const step = this.#future.pop();
    if (!step) return false;
    // Typing goes on as a step of its own after a redo.
    this.#past.push({ ...step, merge: null });
    return true;
  }
}
