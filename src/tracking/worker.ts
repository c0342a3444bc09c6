import { parentPort, type Transferable } from 'node:worker_threads';
import type { Frame } from '../recording/recording.ts';
import { type FromWorker, toWorker } from './protocol.ts';
import type { Trace } from './trace.ts';
import type { PoseColumns } from './trace-builder.ts';
import { trackFrames } from './track.ts';

/** Frames taken between two reports to the pool, which then sends more. */
const TAKEN_EVERY = 8;

/** The frames of one job as they arrive. */
class Inbox {
  readonly #frames: Frame[] = [];
  #ended = false;
  #wake: (() => void) | null = null;
  readonly abort = new AbortController();

  put(frame: Frame): void {
    this.#frames.push(frame);
    this.#wake?.();
  }

  end(): void {
    this.#ended = true;
    this.#wake?.();
  }

  async *frames(taken: (count: number) => void): AsyncGenerator<Frame> {
    let count = 0;
    for (;;) {
      this.abort.signal.throwIfAborted();
      const frame = this.#frames.shift();
      if (frame !== undefined) {
        yield frame;
        if (++count % TAKEN_EVERY === 0) taken(TAKEN_EVERY);
      } else if (this.#ended) return;
      else {
        await new Promise<void>((resolve) => {
          this.#wake = resolve;
        });
      }
    }
  }
}

const jobs = new Map<number, Inbox>();

function post(message: FromWorker, transfer: Transferable[] = []): void {
  parentPort!.postMessage(message, transfer);
}

function columnsOf(poses: PoseColumns): Transferable[] {
  return [poses.time_s, poses.angle, poses.x_px, poses.y_px].map((column) => column.buffer as ArrayBuffer);
}

function buffersOf(trace: Trace): Transferable[] {
  return [...columnsOf(trace), trace.quality.buffer as ArrayBuffer, trace.frame_index.buffer as ArrayBuffer];
}

parentPort!.on('message', (raw: unknown) => {
  const message = toWorker(raw);
  const { job } = message;
  switch (message.kind) {
    case 'begin': {
      const inbox = new Inbox();
      jobs.set(job, inbox);
      const frames = inbox.frames((count) => post({ kind: 'taken', job, frames: count }));
      const onPoses = (poses: PoseColumns) => post({ kind: 'poses', job, poses }, columnsOf(poses));
      trackFrames(frames, message.view, { signal: inbox.abort.signal, onPoses })
        .then(
          (outcome) => post({ kind: 'done', job, outcome }, outcome.ok ? buffersOf(outcome.trace) : []),
          (error: unknown) =>
            post({ kind: 'failed', job, message: error instanceof Error ? error.message : String(error) }),
        )
        .finally(() => jobs.delete(job));
      break;
    }
    case 'frame':
      jobs.get(job)?.put(message.frame);
      break;
    case 'end':
      jobs.get(job)?.end();
      break;
    case 'abort': {
      const inbox = jobs.get(job);
      inbox?.abort.abort();
      inbox?.end();
      break;
    }
  }
});
