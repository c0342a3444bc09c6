import type { Session } from '../../contract.ts';

/** One change of the session on its way to the host. */
export interface QueuedEdit {
  readonly session: Session;
  readonly label: string;
  readonly merge: string | undefined;
}

/** Edits that wait for the host: sent one after the other, each on the revision that the one before made. */
export interface EditQueue {
  /** Adds an edit; one that waits with the same merge key is replaced. */
  push(edit: QueuedEdit): void;
  /** Resolves when nothing waits and nothing is on its way. */
  idle(): Promise<void>;
  readonly busy: boolean;
}

/**
 * @param send hands one edit to the host on a base revision and gives the revision it made.
 * @param ended called when the queue has run empty, with the last revision, or with the error that emptied it.
 */
export function editQueue(
  baseNow: () => number,
  send: (edit: QueuedEdit, base: number) => Promise<number>,
  ended: (outcome: { revision: number } | { error: unknown }) => void,
): EditQueue {
  let waiting: QueuedEdit[] = [];
  let running: Promise<void> | null = null;

  async function run(): Promise<void> {
    let revision = baseNow();
    try {
      for (let next = waiting.shift(); next; next = waiting.shift()) revision = await send(next, revision);
      running = null;
      ended({ revision });
    } catch (error) {
      waiting = [];
      running = null;
      ended({ error });
    }
  }

  return {
    push(edit) {
      const last = waiting.at(-1);
      if (last && edit.merge !== undefined && last.merge === edit.merge) waiting[waiting.length - 1] = edit;
      else waiting.push(edit);
      running ??= run();
    },
    async idle() {
      while (running) await running;
    },
    get busy() {
      return running !== null;
    },
  };
}
