/** A rectangle of the displayed picture, in whole displayed pixels, origin at the top left of the full-size frame. */
export interface Region {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** What is known of a recording before a single frame is decoded: facts of the container and the presentation ticks of every frame. */
export interface Recording {
  /** Absolute path of the file. */
  readonly path: string;
  /** Name of the container format, as the demuxer gives it. */
  readonly container: string;
  readonly codec: string;
  readonly pixelFormat: string;
  /** Size as stored, before the rotation for display. */
  readonly storedWidth_px: number;
  readonly storedHeight_px: number;
  /** Size as displayed: rotation applied. */
  readonly width_px: number;
  readonly height_px: number;
  /** How far the stored picture is turned clockwise for display. */
  readonly rotation_deg: 0 | 90 | 180 | 270;
  /** One tick lasts numerator / denominator seconds. */
  readonly timebase: { readonly numerator: number; readonly denominator: number };
  /** Presentation ticks of the frames a player would show, ascending, as the container states them (exact integers). */
  readonly ticks: Float64Array;
  /** Indices into `ticks` of the frames from which decoding can begin, ascending. */
  readonly keyframes: Uint32Array;
  /** Whether decoding may begin in the middle; false where the container's clock is only right when it is read from the start. */
  readonly seekable: boolean;
  /** Frame rate the container states, null where it states none. */
  readonly nominalRate_Hz: number | null;
  /** Size of the file in bytes. */
  readonly bytes: number;
  /** What was odd about the container, as plain sentences; empty for a sound file. */
  readonly remarks: readonly string[];
}

/** One decoded region of one displayed frame. */
export interface Frame {
  /** Index among the displayed frames of the recording: position in `Recording.ticks`. */
  readonly index: number;
  /** Seconds on the recording's presentation clock from its first displayed frame, after `time_scale`. */
  readonly time_s: number;
  readonly width_px: number;
  readonly height_px: number;
  /** Grey values of the region, row by row, `width_px * height_px` bytes. Of a decoded frame they are lent: valid until the next frame is asked for. */
  readonly grey: Uint8Array;
}

/** Which frames of a stretch the container claims, which were decoded, and why the difference. Balanced: claimed = decoded + lost. */
export interface DecodeAccount {
  readonly claimed: number;
  readonly decoded: number;
  readonly lost: number;
  /** One plain sentence where decoding ended early or frames were damaged, else null. */
  readonly problem: string | null;
}
