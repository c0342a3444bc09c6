import { describe, expect, test } from 'vitest';
import type { Session } from '../../../../app/contract.ts';
import { editQueue } from '../../../../app/window/state/edit-queue.ts';

const titled = (title: string): Session => ({
  format: 'needlebeat/session',
  version: 1,
  title,
  recordings: [{ id: 'A', file: 'a.mp4' }],
  views: [],
  segments: [],
});

describe('edits on their way to the host', () => {
  test('go one after the other, each on the revision made by the one before', async () => {
    const sent: [string | undefined, number][] = [];
    const outcomes: unknown[] = [];
    const queue = editQueue(
      () => 7,
      async (edit, base) => {
        await Promise.resolve();
        sent.push([edit.session.title, base]);
        return base + 1;
      },
      (outcome) => outcomes.push(outcome),
    );
    for (const title of ['a', 'b', 'c']) queue.push({ session: titled(title), label: title, merge: undefined });
    expect(queue.busy).toBe(true);
    await queue.idle();
    expect(sent).toEqual([
      ['a', 7],
      ['b', 8],
      ['c', 9],
    ]);
    expect(outcomes).toEqual([{ revision: 10 }]);
    expect(queue.busy).toBe(false);
  });

  test('typing that waits is sent once, as it stands last', async () => {
    const sent: (string | undefined)[] = [];
    const queue = editQueue(
      () => 0,
      async (edit, base) => {
        sent.push(edit.session.title);
        return base + 1;
      },
      () => undefined,
    );
    for (const title of ['1', '1.', '1.2', '1.25'])
      queue.push({ session: titled(title), label: 'Title', merge: 'title' });
    await queue.idle();
    expect(sent).toEqual(['1', '1.25']);
  });

  test('a refusal empties the queue and is told', async () => {
    const outcomes: unknown[] = [];
    const error = new Error('overlap');
    const queue = editQueue(
      () => 0,
      () => Promise.reject(error),
      (outcome) => outcomes.push(outcome),
    );
    queue.push({ session: titled('a'), label: 'a', merge: undefined });
    queue.push({ session: titled('b'), label: 'b', merge: undefined });
    await queue.idle();
    expect(outcomes).toEqual([{ error }]);
  });
});
