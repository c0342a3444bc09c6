import type { Recording } from './recording.ts';

/** What ffprobe says about the picture stream of a file and the container around it. */
export type StreamFacts = Omit<Recording, 'path' | 'ticks' | 'keyframes' | 'seekable' | 'bytes'> & {
  /** Number of frames the container states, null where it states none. */
  readonly statedFrames: number | null;
};

interface Stream {
  readonly codec_name?: string;
  readonly pix_fmt?: string;
  readonly width?: number;
  readonly height?: number;
  readonly time_base?: string;
  readonly avg_frame_rate?: string;
  readonly r_frame_rate?: string;
  readonly nb_frames?: string;
  readonly sample_aspect_ratio?: string;
  readonly field_order?: string;
  readonly tags?: { readonly rotate?: string };
  readonly side_data_list?: readonly { readonly rotation?: number; readonly displaymatrix?: string }[];
}

/** Arguments of ffprobe, after the ones every untrusted file gets, for the output that `parseStreamFacts` reads. `V` leaves cover pictures out. */
export const streamFactsArguments: readonly string[] = ['-show_streams', '-show_format', '-of', 'json'];

/** Reads ffprobe's JSON; null where the file holds no picture stream that could be decoded. */
export function parseStreamFacts(json: string): StreamFacts | null {
  const { streams, format } = JSON.parse(json) as {
    streams?: readonly Stream[];
    format?: { readonly format_name?: string };
  };
  const stream = streams?.[0];
  const timebase = fraction(stream?.time_base);
  if (!stream?.codec_name || !stream.width || !stream.height || timebase === null) return null;
  const remarks: string[] = [];
  const rotation_deg = rotation(stream, remarks);
  const turned = rotation_deg === 90 || rotation_deg === 270;
  const pixelShape = stream.sample_aspect_ratio ?? '1:1';
  if (pixelShape !== '1:1' && pixelShape !== '0:1') {
    remarks.push(`The pixels aren't square (${pixelShape}): angles in the picture are not true angles.`);
  }
  if (stream.field_order !== undefined && !['progressive', 'unknown'].includes(stream.field_order)) {
    remarks.push('The pictures are interlaced: their odd and even lines were taken at different times.');
  }
  const statedFrames = Number(stream.nb_frames);
  return {
    container: format?.format_name ?? 'unknown',
    codec: stream.codec_name,
    pixelFormat: stream.pix_fmt ?? 'unknown',
    storedWidth_px: stream.width,
    storedHeight_px: stream.height,
    width_px: turned ? stream.height : stream.width,
    height_px: turned ? stream.width : stream.height,
    rotation_deg,
    timebase,
    nominalRate_Hz: nominalRate_Hz(stream),
    statedFrames: Number.isInteger(statedFrames) && statedFrames > 0 ? statedFrames : null,
    remarks,
  };
}

/** How far the stored picture is turned clockwise for display: from the display matrix, or from the tag that older programs wrote. */
function rotation(stream: Stream, remarks: string[]): Recording['rotation_deg'] {
  const matrix = stream.side_data_list?.find((data) => data.rotation !== undefined);
  // ffprobe counts the matrix's angle anticlockwise, the tag clockwise.
  const stated_deg = matrix?.rotation !== undefined ? -matrix.rotation : Number(stream.tags?.rotate ?? 0);
  const turns = Math.round((Number.isFinite(stated_deg) ? stated_deg : 0) / 90);
  const rotation_deg = ([0, 90, 180, 270] as const)[((turns % 4) + 4) % 4] ?? 0;
  if (Math.abs(stated_deg - turns * 90) > 0.5) {
    remarks.push(`The container turns the picture by ${stated_deg}°; it is shown turned by ${rotation_deg}°.`);
  }
  if (matrix?.displaymatrix !== undefined && isMirrored(matrix.displaymatrix)) {
    remarks.push('The container asks for a mirrored picture; it is shown as stored, so that turning keeps its sense.');
  }
  return rotation_deg;
}

/** Whether a display matrix as ffprobe prints it (three lines of three numbers) mirrors. */
function isMirrored(printed: string): boolean {
  const rows = printed
    .trim()
    .split('\n')
    .map((line) =>
      line
        .replace(/^\s*\d+:/, '')
        .trim()
        .split(/\s+/)
        .map(Number),
    );
  const [a = 1, b = 0] = rows[0] ?? [];
  const [c = 0, d = 1] = rows[1] ?? [];
  return a * d - b * c < 0;
}

/**
 * ffprobe's base rate, the one that all frame times fit; for a varying rate it may be a multiple of the rate meant, and the average is
 * nearer to it.
 */
function nominalRate_Hz(stream: Stream): number | null {
  const base_Hz = rate(stream.r_frame_rate);
  const average_Hz = rate(stream.avg_frame_rate);
  if (base_Hz === null || average_Hz === null) return base_Hz ?? average_Hz;
  return base_Hz < average_Hz * 1.5 ? base_Hz : average_Hz;
}

function rate(text: string | undefined): number | null {
  const value = fraction(text);
  return value === null ? null : value.numerator / value.denominator;
}

function fraction(text: string | undefined): { numerator: number; denominator: number } | null {
  const [numerator = Number.NaN, denominator = Number.NaN] = (text ?? '').split('/').map(Number);
  return numerator > 0 && denominator > 0 ? { numerator, denominator } : null;
}
