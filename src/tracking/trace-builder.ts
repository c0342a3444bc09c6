import type { Frame } from '../recording/recording.ts';
import type { Fix } from './follow.ts';
import { type EndEdges, sideAngle } from './side-angle.ts';
import type { Refusal, Trace, View } from './trace.ts';

/** Columns of poses, as in `Trace`. */
export interface PoseColumns {
  readonly time_s: Float64Array;
  readonly angle: Float64Array;
  readonly x_px: Float64Array;
  readonly y_px: Float64Array;
}

/** What is known of the bar as a body. */
export interface BarSize {
  readonly halfLength_px: number | null;
  readonly halfWidth_px: number | null;
}

/** Collects the poses of a stretch into columns that grow as needed. */
export class TraceBuilder {
  readonly #view: View;
  readonly #size: BarSize;
  readonly #u_common: number;
  readonly #edges: EndEdges;
  #time_s = new Float64Array(1024);
  #angle = new Float64Array(1024);
  #x_px = new Float64Array(1024);
  #y_px = new Float64Array(1024);
  #sd = new Float64Array(1024);
  #frame_index = new Int32Array(1024);
  #refused: { frame_index: number; reason: Refusal }[] = [];
  #rows = 0;
  #reported = 0;

  constructor(view: View, size: BarSize, u_common: number, edges: EndEdges) {
    this.#edges = edges;
    this.#view = view;
    this.#size = size;
    this.#u_common = u_common;
  }

  /** Number of poses so far. */
  get rows(): number {
    return this.#rows;
  }

  /** Poses not yet taken by `takeNew`. */
  get waiting(): number {
    return this.#rows - this.#reported;
  }

  /** The angle that continues the curve: a bar is the same after half a turn, an end seen from the side is not. */
  #continued(fix: Fix & { ok: true }, before: number | null): number {
    if (this.#view.kind === 'side') {
      const x_px = fix.x_px + this.#view.region.x;
      return sideAngle(this.#view, this.#edges, x_px) ?? x_px - this.#view.axis_x_px;
    }
    return before === null ? fix.angle : fix.angle + Math.PI * Math.round((before - fix.angle) / Math.PI);
  }

  /** Adds a frame's fix, or its refusal. */
  add(frame: Frame, fix: Fix): void {
    if (!fix.ok) {
      this.#refused.push({ frame_index: frame.index, reason: fix.reason });
      return;
    }
    if (this.#view.kind === 'side' && this.#view.half_length_px !== null) {
      if (sideAngle(this.#view, this.#edges, fix.x_px + this.#view.region.x) === null) {
        this.#refused.push({ frame_index: frame.index, reason: 'no_fit' });
        return;
      }
    }
    if (this.#rows === this.#time_s.length) this.#grow();
    const i = this.#rows++;
    this.#time_s[i] = frame.time_s;
    this.#angle[i] = this.#continued(fix, i > 0 ? this.#angle[i - 1]! : null);
    this.#x_px[i] = fix.x_px + this.#view.region.x;
    this.#y_px[i] = fix.y_px + this.#view.region.y;
    this.#sd[i] = fix.sd;
    this.#frame_index[i] = frame.index;
  }

  /** Copies of the poses added since the last call. */
  takeNew(): PoseColumns {
    const from = this.#reported;
    this.#reported = this.#rows;
    return {
      time_s: this.#time_s.slice(from, this.#rows),
      angle: this.#angle.slice(from, this.#rows),
      x_px: this.#x_px.slice(from, this.#rows),
      y_px: this.#y_px.slice(from, this.#rows),
    };
  }

  /** The finished trace. */
  finish(): Trace {
    const n = this.#rows;
    const sd = this.#sd.slice(0, n);
    // Best means better than all but a hundredth: a single lucky frame sets no standard.
    const best = sd.slice().sort()[Math.floor(n / 100)] ?? 1;
    return {
      time_s: this.#time_s.slice(0, n),
      angle: this.#angle.slice(0, n),
      unit: this.#view.kind === 'side' && this.#view.half_length_px === null ? 'px' : 'rad',
      x_px: this.#x_px.slice(0, n),
      y_px: this.#y_px.slice(0, n),
      quality: sd.map((value) => Math.min(1, best / value)),
      frame_index: this.#frame_index.slice(0, n),
      refused: this.#refused,
      halfLength_px: this.#size.halfLength_px,
      ...(this.#size.halfWidth_px !== null && { halfWidth_px: this.#size.halfWidth_px }),
      u_common: this.#u_common,
    };
  }

  #grow(): void {
    const wider = (from: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> => {
      const to = new Float64Array(2 * from.length);
      to.set(from);
      return to;
    };
    this.#time_s = wider(this.#time_s);
    this.#angle = wider(this.#angle);
    this.#x_px = wider(this.#x_px);
    this.#y_px = wider(this.#y_px);
    this.#sd = wider(this.#sd);
    const index = new Int32Array(2 * this.#frame_index.length);
    index.set(this.#frame_index);
    this.#frame_index = index;
  }
}
