import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { History } from '../../../app/host/history.ts';

describe('undo and redo', () => {
  it('go back and forth with their labels', () => {
    const history = new History(0);
    expect([history.undoLabel, history.redoLabel, history.undo(), history.redo()]).toEqual([null, null, false, false]);
    history.push(1, 'one', null);
    history.push(2, 'two', null);
    expect(history.undoLabel).toBe('two');
    history.undo();
    expect([history.state, history.undoLabel, history.redoLabel]).toEqual([1, 'one', 'two']);
    history.push(3, 'three', null);
    expect([history.state, history.redoLabel]).toEqual([3, null]);
  });

  it('take a drag or a word typed as one step', () => {
    const history = new History(0);
    for (const n of [1, 2, 3]) history.push(n, 'Move an edge', 'edge s01');
    history.push(4, 'Move an edge', 'edge s02');
    history.undo();
    expect(history.state).toBe(3);
    history.undo();
    expect(history.state).toBe(0);
    history.redo();
    history.push(9, 'Move an edge', 'edge s01');
    history.undo();
    expect(history.state).toBe(3);
  });

  it('agree with a list of all states, whatever is done', () => {
    const step = fc.oneof(
      fc.record({ kind: fc.constant('push' as const), merge: fc.constantFrom(null, 'a', 'b') }),
      fc.record({ kind: fc.constantFrom('undo' as const, 'redo' as const) }),
    );
    fc.assert(
      fc.property(fc.array(step, { maxLength: 60 }), (steps) => {
        const history = new History(0);
        let past: { n: number; merge: string | null }[] = [{ n: 0, merge: null }];
        let future: { n: number; merge: string | null }[] = [];
        steps.forEach((s, i) => {
          if (s.kind === 'push') {
            history.push(i + 1, 'x', s.merge);
            const joins = s.merge !== null && past.length > 1 && past.at(-1)?.merge === s.merge && future.length === 0;
            past = [...(joins ? past.slice(0, -1) : past), { n: i + 1, merge: s.merge }];
            future = [];
          } else if (s.kind === 'undo') {
            expect(history.undo()).toBe(past.length > 1);
            const last = past.length > 1 ? past.pop() : undefined;
            if (last) future.push(last);
          } else {
            expect(history.redo()).toBe(future.length > 0);
            const next = future.pop();
            if (next) past.push({ ...next, merge: null });
          }
          expect(history.state).toBe(past.at(-1)?.n);
        });
      }),
      { seed: 7 },
    );
  });
});
