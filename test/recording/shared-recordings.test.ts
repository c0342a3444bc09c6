import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, test } from 'vitest';
import { findFfmpeg } from '../../src/recording/find-ffmpeg.ts';
import { frameTime_s } from '../../src/recording/frame-clock.ts';
import { openRecording } from '../../src/recording/open-recording.ts';

const shared = resolve('../shared/recordings');
const present = existsSync(shared);
if (!present) console.log('../shared/recordings is not there: their frame times are left unchecked');

describe.skipIf(!present)('development recordings', () => {
  const folders = present ? readdirSync(shared).filter((name) => existsSync(join(shared, name, 'truth.json'))) : [];
  test.each(folders)('%s: frame times and size are those drawn', async (folder) => {
    const name = readdirSync(join(shared, folder)).find((file) => /\.(mp4|mov)$/.test(file));
    const recording = await openRecording(join(shared, folder, name!), await findFfmpeg(process.env));
    const truth = JSON.parse(readFileSync(join(shared, folder, 'truth.json'), 'utf8')) as Record<string, number>;
    const rows = readFileSync(join(shared, folder, 'frames.csv'), 'utf8')
      .trim()
      .split('\n')
      .slice(1);
    expect(recording).toMatchObject({
      ...{ width_px: truth.width, height_px: truth.height, rotation_deg: truth.rotation_deg, remarks: [] },
    });
    expect(recording.ticks.length).toBe(rows.length);
    const tick_s = recording.timebase.numerator / recording.timebase.denominator;
    for (const [index, row] of rows.entries()) {
      const [, container_s, time_s] = row.split(',').map(Number);
      // The table is rounded to microseconds.
      expect(Math.abs(recording.ticks[index]! * tick_s - container_s!)).toBeLessThan(1e-6);
      expect(Math.abs(frameTime_s(recording, index, 1) - time_s!)).toBeLessThan(1.5e-6);
    }
  });
});
