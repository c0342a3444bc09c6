import { describe, expect, test } from 'vitest';
import { parseStreamFacts } from '../../src/recording/stream-facts.ts';

const stream = {
  ...{ codec_name: 'h264', pix_fmt: 'yuv420p', width: 1280, height: 720, time_base: '1/600', nb_frames: '1831' },
  ...{ r_frame_rate: '30000/1001', avg_frame_rate: '30000/1003', field_order: 'progressive' },
};
const facts = (more: object) =>
  parseStreamFacts(JSON.stringify({ streams: [{ ...stream, ...more }], format: { format_name: 'mov' } }));
const matrix = (rotation: number, rows = '00000000: 0 65536 0\n00000001: -65536 0 0\n00000002: 0 0 1073741824\n') => ({
  side_data_list: [{ side_data_type: 'Display Matrix', displaymatrix: `\n${rows}`, rotation }],
});

describe('rotation', () => {
  test.each([
    ['side data, which count anticlockwise', matrix(-90), 90],
    ['side data the other way', matrix(90), 270],
    ['half a turn', matrix(180), 180],
    ['half a turn, negative', matrix(-180), 180],
    ['the old tag, which counts clockwise', { tags: { rotate: '270' } }, 270],
    ['both, as some versions print them: once', { ...matrix(-90), tags: { rotate: '90' } }, 90],
    ['none', {}, 0],
    ['nonsense in the tag', { tags: { rotate: 'upright' } }, 0],
  ])('%s', (_, more, rotation_deg) => {
    expect(facts(more)).toMatchObject({
      rotation_deg,
      width_px: rotation_deg % 180 === 0 ? 1280 : 720,
      height_px: rotation_deg % 180 === 0 ? 720 : 1280,
      ...{ storedWidth_px: 1280, storedHeight_px: 720, remarks: [] },
    });
  });

  test('an odd angle and a mirror are remarked on', () => {
    expect(facts(matrix(-85))).toMatchObject({
      rotation_deg: 90,
      remarks: ['The container turns the picture by 85°; it is shown turned by 90°.'],
    });
    const mirror = '00000000: -65536 0 0\n00000001: 0 65536 0\n00000002: 0 0 1073741824\n';
    expect(facts(matrix(0, mirror))?.remarks).toEqual([
      'The container asks for a mirrored picture; it is shown as stored, so that turning keeps its sense.',
    ]);
  });
});

describe('the rest', () => {
  test('timebase, frames and rate', () => {
    expect(facts({})).toMatchObject({
      ...{ timebase: { numerator: 1, denominator: 600 }, statedFrames: 1831, nominalRate_Hz: 30000 / 1001 },
    });
    expect(facts({ nb_frames: 'N/A' })?.statedFrames).toBeNull();
  });

  test('of a varying rate the average, where the base rate is a multiple of it', () => {
    expect(facts({ r_frame_rate: '600/1', avg_frame_rate: '29/1' })?.nominalRate_Hz).toBe(29);
    expect(facts({ r_frame_rate: '0/0', avg_frame_rate: '0/0' })?.nominalRate_Hz).toBeNull();
  });

  test('pixels that are not square, and interlacing, are remarked on', () => {
    expect(facts({ sample_aspect_ratio: '4:3', field_order: 'tt' })?.remarks).toEqual([
      "The pixels aren't square (4:3): angles in the picture are not true angles.",
      'The pictures are interlaced: their odd and even lines were taken at different times.',
    ]);
    expect(facts({ sample_aspect_ratio: '1:1' })?.remarks).toEqual([]);
  });

  test('no stream, or one without a size, holds no picture', () => {
    expect(parseStreamFacts('{"streams": [], "format": {}}')).toBeNull();
    expect(facts({ width: 0 })).toBeNull();
  });
});
