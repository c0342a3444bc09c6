import { parentPort, type Transferable } from 'node:worker_threads';
import type { Frame } from '../recording/recording.ts';
import { type FromWorker, toWorker } from './protocol.ts';
import type { Trace } from './trace.ts';
import type { PoseColumns } from './trace-builder.ts';
import { trackFrames } from './track.ts';
import { openCv } from './vision.ts';

/** Frames taken between two reports to the pool, which then sends more. */
const TAKEN_EVERY = 8;

/** Slots of memory shared with the pool. */
const memory = new Map<number, Uint8Array>();

/** The frames of one job as they arrive. */
class Inbox {
  readonly #frames: Frame[] = [];
  readonly #slots = new Map<Frame, number>();
  #ended = false;
  #wake: (() => void) | null = null;
  #free: number[] = [];
  readonly abort = new AbortController();

  put(frame: Frame, slot: number): void {
    this.#slots.set(frame, slot);
    this.#frames.push(frame);
    this.#wake?.();
  }

  end(): void {
    this.#ended = true;
    this.#wake?.();
  }

  /** The frame's picture is no longer needed. */
  done(frame: Frame): void {
    const slot = this.#slots.get(frame);
    if (slot === undefined) return;
    this.#slots.delete(frame);
    this.#free.push(slot);
  }

  /** Slots no longer needed since the last call. */
  freed(): number[] {
    const free = this.#free;
    this.#free = [];
    return free;
  }

  /** All slots still held; the job is over. */
  lastSlots(): number[] {
    return [...this.freed(), ...this.#slots.values()];
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

// Loading takes a while: better now, while the recording is still being looked at, than when its frames are waiting.
openCv();

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
      for (const slot of message.forget) memory.delete(slot);
      const inbox = new Inbox();
      jobs.set(job, inbox);
      const frames = inbox.frames((count) => post({ kind: 'taken', job, frames: count, slots: inbox.freed() }));
      const onPoses = (poses: PoseColumns) => post({ kind: 'poses', job, poses }, columnsOf(poses));
      const onDone = (frame: Frame) => inbox.done(frame);
      trackFrames(frames, message.view, { signal: inbox.abort.signal, onPoses, onDone })
        .then(
          (outcome) =>
            post({ kind: 'done', job, outcome, slots: inbox.lastSlots() }, outcome.ok ? buffersOf(outcome.trace) : []),
          (error: unknown) => {
            const why = error instanceof Error ? error.message : String(error);
            post({ kind: 'failed', job, message: why, slots: inbox.lastSlots() });
          },
        )
        .finally(() => jobs.delete(job));
      break;
    }
    case 'frame': {
      const { slot } = message.grey;
      if (message.grey.memory !== null) memory.set(slot, new Uint8Array(message.grey.memory));
      const grey = memory.get(slot);
      if (grey === undefined) throw new Error(`slot ${slot} has no memory`);
      const inbox = jobs.get(job);
      // The job may have failed while the frame was under way.
      if (inbox === undefined) post({ kind: 'taken', job, frames: 0, slots: [slot] });
      else inbox.put({ ...message.frame, grey }, slot);
      break;
    }
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
