import type { Frame } from '../recording/recording.ts';
import type { FilledSlot } from './picture-slots.ts';
import type { TrackOutcome, View } from './trace.ts';
import type { PoseColumns } from './trace-builder.ts';

/** What the pool tells a worker; `job` numbers the stretch. The grey values of frames lie in slots of shared memory. */
export type ToWorker =
  | { readonly kind: 'begin'; readonly job: number; readonly view: View; readonly forget: readonly number[] }
  | { readonly kind: 'frame'; readonly job: number; readonly frame: Omit<Frame, 'grey'>; readonly grey: FilledSlot }
  | { readonly kind: 'end'; readonly job: number }
  | { readonly kind: 'abort'; readonly job: number };

/** What a worker tells the pool: `slots` are those it no longer needs. Every job that was begun ends in exactly one `done` or `failed`. */
export type FromWorker =
  | { readonly kind: 'taken'; readonly job: number; readonly frames: number; readonly slots: readonly number[] }
  | { readonly kind: 'poses'; readonly job: number; readonly poses: PoseColumns }
  | { readonly kind: 'done'; readonly job: number; readonly outcome: TrackOutcome; readonly slots: readonly number[] }
  | { readonly kind: 'failed'; readonly job: number; readonly message: string; readonly slots: readonly number[] };

/** Bytes of a job's frames that may be under way to its worker or waiting there; more are held back. */
const BYTES_UNDER_WAY = 16 * 2 ** 20;
/** The same in frames, at least and at most. */
const LEAST_UNDER_WAY = 8;
const MOST_UNDER_WAY = 256;

/** How many frames of `bytes` each may be under way: enough for the decoder to go on while a worker learns a bar. */
export function framesUnderWay(bytes: number): number {
  return Math.min(MOST_UNDER_WAY, Math.max(LEAST_UNDER_WAY, Math.floor(BYTES_UNDER_WAY / Math.max(1, bytes))));
}

const TO_WORKER: readonly string[] = ['begin', 'frame', 'end', 'abort'] satisfies ToWorker['kind'][];
const FROM_WORKER: readonly string[] = ['taken', 'poses', 'done', 'failed'] satisfies FromWorker['kind'][];

/** The message, if it is one for a worker. @throws TypeError otherwise */
export function toWorker(message: unknown): ToWorker {
  if (!hasKind(message, TO_WORKER)) throw new TypeError(`a tracking worker expects one of ${TO_WORKER.join(', ')}`);
  return message as ToWorker;
}

/** The message, if it is one from a worker. @throws TypeError otherwise */
export function fromWorker(message: unknown): FromWorker {
  if (!hasKind(message, FROM_WORKER)) throw new TypeError(`a tracking pool expects one of ${FROM_WORKER.join(', ')}`);
  return message as FromWorker;
}

function hasKind(message: unknown, kinds: readonly string[]): boolean {
  if (typeof message !== 'object' || message === null) return false;
  const { kind, job } = message as { kind?: unknown; job?: unknown };
  return typeof kind === 'string' && kinds.includes(kind) && Number.isSafeInteger(job);
}
