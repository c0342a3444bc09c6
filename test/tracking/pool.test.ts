import { Worker } from 'node:worker_threads';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { Frame } from '../../src/recording/recording.ts';
import { TrackerPool } from '../../src/tracking/pool.ts';
import { framesUnderWay, fromWorker, toWorker } from '../../src/tracking/protocol.ts';
import type { PlanView } from '../../src/tracking/trace.ts';
import { trackFrames } from '../../src/tracking/track.ts';
import { asStream, drawBar } from './drawn-bar.ts';
import { traceOf } from './judge.ts';

const drawn = drawBar({ frames: 90, width: 120, height: 90, length_px: 90, thickness_px: 12 });
const view: PlanView = { kind: 'plan', region: { x: 0, y: 0, width: 120, height: 90 } };

/** Frames that never end, and whether whoever took them has left. */
function endless() {
  const state = { given: 0, left: false };
  async function* frames(): AsyncGenerator<Frame> {
    try {
      for (;;) {
        const frame = drawn.frames[state.given % drawn.frames.length]!;
        yield { ...frame, index: state.given, time_s: state.given / 30, grey: frame.grey.slice() };
        state.given++;
        if (state.given % 8 === 0) await new Promise((resolve) => setTimeout(resolve, 1));
      }
    } finally {
      state.left = true;
    }
  }
  return { state, frames: frames() };
}

/** Every worker that the pool starts, so that a test can end one from outside. */
function heldWorkers(): Worker[] {
  const held: Worker[] = [];
  const on = Worker.prototype.on;
  vi.spyOn(Worker.prototype, 'on').mockImplementation(function (this: Worker, ...args: Parameters<typeof on>) {
    if (!held.includes(this)) held.push(this);
    return on.apply(this, args);
  });
  return held;
}

afterEach(() => vi.restoreAllMocks());

describe('pool of tracking workers', () => {
  it('gives what tracking on the spot gives, to the last bit, and reports poses on the way', async () => {
    await using pool = new TrackerPool(1);
    const seen: number[] = [];
    const outcome = await pool.track(asStream(drawn.frames), view, { onPoses: (poses) => seen.push(...poses.angle) });
    const here = await trackFrames(asStream(drawn.frames), view);
    expect(outcome).toEqual(here);
    expect(seen).toEqual([...traceOf(here).angle]);
  });

  it('has a frame’s grey values copied before it asks for the next one', async () => {
    await using pool = new TrackerPool(1);
    const lent = new Uint8Array(120 * 90);
    const reused = async function* () {
      for (const frame of drawn.frames) {
        lent.set(frame.grey);
        yield { ...frame, grey: lent };
        lent.fill(0);
      }
    };
    const one = await pool.track(asStream(drawn.frames), view);
    const two = await pool.track(reused(), view);
    expect(two).toEqual(one);
  });

  it('follows more stretches than it has workers', async () => {
    await using pool = new TrackerPool(2);
    const outcomes = await Promise.all([1, 2, 3, 4, 5].map(() => pool.track(asStream(drawn.frames), view)));
    expect(pool.threadIds.length).toBe(2);
    for (const outcome of outcomes) expect(outcome).toEqual(outcomes[0]);
  });

  it('holds frames back when the worker falls behind', async () => {
    await using pool = new TrackerPool(1);
    const abort = new AbortController();
    const { state, frames } = endless();
    let taken = 0;
    let farthest = 0;
    const watched = (async function* () {
      for await (const frame of frames) {
        farthest = Math.max(farthest, state.given - taken);
        yield frame;
      }
    })();
    const job = pool.track(watched, view, {
      signal: abort.signal,
      onProgress: (count) => {
        taken = count;
        if (count >= 400) abort.abort(new Error('enough'));
      },
    });
    await expect(job).rejects.toThrow('enough');
    expect(farthest).toBeLessThanOrEqual(framesUnderWay(120 * 90) + 1);
    expect(state.left).toBe(true);
  });

  it('rejects with the reason when aborted, leaves the frames, and works on', async () => {
    await using pool = new TrackerPool(1);
    const abort = new AbortController();
    const { state, frames } = endless();
    const job = pool.track(frames, view, { signal: abort.signal });
    setTimeout(() => abort.abort(new Error('no longer wanted')), 50);
    await expect(job).rejects.toThrow('no longer wanted');
    expect(state.left).toBe(true);
    expect((await pool.track(asStream(drawn.frames), view)).ok).toBe(true);
    const before = AbortSignal.abort(new Error('never begun'));
    await expect(pool.track(asStream(drawn.frames), view, { signal: before })).rejects.toThrow('never begun');
  });

  it('a worker that dies rejects what it was doing and is replaced', async () => {
    const held = heldWorkers();
    await using pool = new TrackerPool(1);
    const { state, frames } = endless();
    const job = pool.track(frames, view);
    await vi.waitFor(() => expect(state.given).toBeGreaterThan(10));
    const [first] = pool.threadIds;
    await held[0]!.terminate();
    await expect(job).rejects.toThrow(/thread that follows the bar has died/);
    expect(state.left).toBe(true);
    expect(pool.threadIds).toEqual([]);
    expect((await pool.track(asStream(drawn.frames), view)).ok).toBe(true);
    expect(pool.threadIds[0]).not.toBe(first);
  });

  it.each(['error', 'messageerror'])('a worker that reports %s is taken out', async (event) => {
    const held = heldWorkers();
    await using pool = new TrackerPool(1);
    const { state, frames } = endless();
    const job = pool.track(frames, view);
    await vi.waitFor(() => expect(state.given).toBeGreaterThan(10));
    held[0]!.emit(event, new Error('out of order'));
    await expect(job).rejects.toThrow(/has died: out of order/);
    expect(pool.threadIds).toEqual([]);
  });

  it('a failure of the frames comes through untouched', async () => {
    await using pool = new TrackerPool(1);
    const failure = new RangeError('the file ends here');
    const frames = (async function* (): AsyncGenerator<Frame> {
      yield { ...drawn.frames[0]!, grey: drawn.frames[0]!.grey.slice() };
      throw failure;
    })();
    await expect(pool.track(frames, view)).rejects.toBe(failure);
    expect((await pool.track(asStream(drawn.frames), view)).ok).toBe(true);
  });

  it('closing rejects what is under way and leaves no thread, however often', async () => {
    const pool = new TrackerPool(1);
    const running = pool.track(endless().frames, view);
    const waiting = pool.track(asStream(drawn.frames), view);
    const both = Promise.allSettled([running, waiting]);
    await new Promise((resolve) => setTimeout(resolve, 50));
    await pool.close();
    await pool.close();
    expect((await both).map(({ status }) => status)).toEqual(['rejected', 'rejected']);
    expect(pool.threadIds).toEqual([]);
    await expect(pool.track(asStream(drawn.frames), view)).rejects.toThrow(/closed/);
  });

  it('needs a sensible size', () => {
    expect(() => new TrackerPool(0)).toThrow(RangeError);
    expect(() => new TrackerPool(1.5)).toThrow(/whole number/);
  });
});

describe('messages between pool and worker', () => {
  it('anything unknown is refused on both sides', () => {
    expect(toWorker({ kind: 'end', job: 3 })).toEqual({ kind: 'end', job: 3 });
    expect(fromWorker({ kind: 'taken', job: 3, frames: 8 })).toMatchObject({ frames: 8 });
    for (const odd of [null, 3, {}, { kind: 'end' }, { kind: 'else', job: 1 }, { kind: 'done', job: 1.5 }]) {
      expect(() => toWorker(odd)).toThrow(TypeError);
      expect(() => fromWorker(odd)).toThrow(TypeError);
    }
  });
});
