import { computed, signal } from '@preact/signals';
import type { DocumentState, RecordingState, Session } from '../../contract.ts';
import { editQueue } from './edit-queue.ts';
import { ask, host, tellFailure } from './host.ts';

/** What the host said last about the document; null until it has spoken. */
export const documentState = signal<DocumentState | null>(null);

/** The session with the edits that are still on their way to the host. */
const draft = signal<Session | null>(null);

/** The session as the user sees it; null where nothing is open. */
export const session = computed<Session | null>(() => draft.value ?? documentState.value?.session ?? null);

/** The recordings of the session as the host has them. */
export const recordings = computed<readonly RecordingState[]>(() => documentState.value?.recordings ?? []);

let settledRevision = 0;

const queue = editQueue(
  () => Math.max(documentState.value?.revision ?? 0, settledRevision),
  async (edit, base) => {
    const { session: next, label, merge } = edit;
    const answer = await host().call('edit', { session: next, base, label, ...(merge === undefined ? {} : { merge }) });
    return answer.revision;
  },
  (outcome) => {
    if ('revision' in outcome) {
      settledRevision = outcome.revision;
      settle();
      return;
    }
    tellFailure(outcome.error);
    draft.value = null;
    void readDocument();
  },
);

/** Takes what the host says of the document. */
export function takeDocument(state: DocumentState): void {
  if (documentState.value === null || state.session === null) settledRevision = 0;
  documentState.value = state;
  settle();
}

/** Asks the host for the document as it is. */
export async function readDocument(): Promise<void> {
  const state = await ask('getDocument', {});
  if (!state) return;
  settledRevision = 0;
  takeDocument(state);
}

/**
 * Changes the session. It shows at once and is undone with one step; the host checks and keeps it.
 * @param change makes the next session from the present one; null or the same session: nothing to change.
 * @param merge edits in a row with the same key become one undo step (typing, dragging).
 */
export function edit(label: string, change: (session: Session) => Session | null, merge?: string): void {
  const before = session.value;
  const after = before === null ? null : change(before);
  if (after === null || after === before) return;
  draft.value = after;
  queue.push({ session: after, label, merge });
}

/** Resolves once the host has every edit made so far. */
export const editsSettled = (): Promise<void> => queue.idle();

/** Undoes or redoes one step. */
export async function step(way: 'undo' | 'redo'): Promise<void> {
  await queue.idle();
  await ask(way, {});
}

/** The draft has done its duty as soon as the host's own copy has caught up with it. */
function settle(): void {
  if (!queue.busy && (documentState.value?.revision ?? 0) >= settledRevision) draft.value = null;
}
