import { startChild } from './ffmpeg-child.ts';
import type { FfmpegTools } from './find-ffmpeg.ts';
import { ffprobeInputOptions, inputName } from './input-options.ts';

/** The picture packets of a file as aligned columns, in the order they are stored. */
export interface PacketList {
  readonly pts: Float64Array;
  /** 1 where decoding can begin. */
  readonly key: Uint8Array;
  /** Packets without a presentation time: where there are any, `pts` is of no use. */
  readonly untimed: number;
  /** Packets that are decoded but never shown: what an edit list cuts away, and empty packets. */
  readonly hidden: number;
  /** Whether ffprobe came to the end of the file by itself and without complaint, else what it said. */
  readonly complaint: string | null;
}

/**
 * Lists the packets of the picture stream without decoding any, as a stream: a long recording costs time for reading it and
 * sixteen bytes a frame.
 */
export async function listPackets(path: string, tools: FfmpegTools, signal?: AbortSignal): Promise<PacketList> {
  const child = startChild(
    tools.ffprobe,
    [
      ...['-v', 'error', ...ffprobeInputOptions, '-select_streams', 'V:0'],
      ...['-show_entries', 'packet=pts,size,flags', '-of', 'compact=p=0', inputName(path)],
    ],
    { deadlines: { whole_s: null, silence_s: 60 }, signal },
  );
  const pts = new GrowingColumn();
  const key = new GrowingColumn();
  let untimed = 0;
  let hidden = 0;
  let rest = '';
  child.stdout.setEncoding('latin1');
  child.stdout.on('data', (text: string) => {
    child.progressed();
    const lines = (rest + text).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) {
      const packet = /^pts=(-?\d+|N\/A)\|size=(\d+)\|flags=(\S+)/.exec(line);
      if (packet === null) continue;
      const [, tick, size, flags] = packet;
      if (size === '0' || flags?.includes('D')) hidden++;
      else if (tick === 'N/A') untimed++;
      else {
        pts.push(Number(tick));
        key.push(flags?.includes('K') ? 1 : 0);
      }
    }
  });
  const end = await child.end;
  signal?.throwIfAborted();
  const complaint = end.code === 0 && end.stderr === '' ? null : end.stderr || 'reading did not end';
  return { pts: pts.values(), key: Uint8Array.from(key.values()), untimed, hidden, complaint };
}

class GrowingColumn {
  private column = new Float64Array(4096);
  private length = 0;

  push(value: number): void {
    if (this.length === this.column.length) {
      const wider = new Float64Array(this.column.length * 2);
      wider.set(this.column);
      this.column = wider;
    }
    this.column[this.length++] = value;
  }

  values(): Float64Array {
    return this.column.slice(0, this.length);
  }
}
