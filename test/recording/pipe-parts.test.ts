import { describe, expect, test } from 'vitest';
import { FrameTicks } from '../../src/recording/frame-ticks.ts';
import { JpegParts } from '../../src/recording/jpeg-parts.ts';
import { lumaOf, reduceToBytes } from '../../src/recording/luma.ts';
import { RawPictures } from '../../src/recording/raw-pictures.ts';
import type { BlockCutter } from '../../src/recording/timed-blocks.ts';

/** The blocks that come out when the bytes arrive in pieces of a given size. */
function cut(cutter: BlockCutter, bytes: Uint8Array, piece: number): Uint8Array[] {
  const blocks: Uint8Array[] = [];
  for (let at = 0; at < bytes.length; at += piece) {
    cutter.take(bytes.subarray(at, at + piece), (block) => blocks.push(block));
  }
  return blocks;
}

const pieces = [1, 2, 5, 7, 64, 1000];

describe.each(pieces)('in pieces of %d bytes', (piece) => {
  test('raw pictures of one byte a pixel', () => {
    const bytes = Uint8Array.from({ length: 20 }, (_, i) => i);
    expect(cut(new RawPictures(6, 8), bytes, piece).map((block) => [...block])).toEqual([
      [0, 1, 2, 3, 4, 5],
      [6, 7, 8, 9, 10, 11],
      [12, 13, 14, 15, 16, 17],
    ]);
  });

  test('raw pictures of two bytes a pixel, rounded to one', () => {
    const bytes = new Uint8Array(Uint16Array.of(0, 1, 2, 3, 4, 1021, 1022, 1023).buffer);
    expect(cut(new RawPictures(4, 10), bytes, piece).map((block) => [...block])).toEqual([
      [0, 0, 1, 1],
      [1, 255, 255, 255],
    ]);
  });

  test('JPEG parts', () => {
    const part = (content: string) =>
      `--ffmpeg\r\nContent-type: image/jpeg\r\nContent-length: ${content.length}\r\n\r\n${content}\r\n`;
    const bytes = Buffer.from(part('one') + part('a longer one\r\n\r\nwith a gap') + part('x'), 'latin1');
    const parts = cut(new JpegParts(), bytes, piece).map((block) => Buffer.from(block).toString('latin1'));
    expect(parts).toEqual(['one', 'a longer one\r\n\r\nwith a gap', 'x']);
  });

  test('ticks', () => {
    const text =
      '#software: x\n#tb 0: 1/600\n#media_type 0: video\n0,  -20,  -20,  20,  4, 0x1\n0, 0,  40, 20, 4, 0x2\n';
    const ticks = new FrameTicks({ numerator: 1, denominator: 600 });
    const found: number[] = [];
    for (let at = 0; at < text.length; at += piece) {
      ticks.push(text.slice(at, at + piece));
      for (let tick = ticks.shift(); tick !== undefined; tick = ticks.shift()) found.push(tick);
    }
    expect(found).toEqual([-20, 40]);
  });
});

test('a part that states an absurd length is passed over', () => {
  const bytes = Buffer.from('Content-length: 99999999999\r\n\r\nContent-length: 2\r\n\r\nok');
  expect(cut(new JpegParts(), bytes, 10).map((block) => Buffer.from(block).toString())).toEqual(['ok']);
});

test('ticks in another timebase are converted', () => {
  const ticks = new FrameTicks({ numerator: 1, denominator: 90000 });
  ticks.push('#tb 0: 1/30\n0, 7, 7, 1, 4, 0x0\n');
  expect(ticks.shift()).toBe(21000);
});

test('each pixel format has one way to its grey values', () => {
  expect(lumaOf('yuvj420p')).toEqual({ filters: ['extractplanes=y', 'format=gray'], bits: 8 });
  expect(lumaOf('yuv422p10le')).toEqual({ filters: ['extractplanes=y', 'format=gray10le'], bits: 10 });
  expect(lumaOf('yuv420p12le').bits).toBe(12);
  expect(lumaOf('gbrp')).toEqual({ filters: ['format=gray'], bits: 8 });
  const grey = new Uint8Array(4);
  reduceToBytes(new Uint8Array(Uint16Array.of(0, 7, 8, 4095).buffer), 12, grey);
  expect([...grey]).toEqual([0, 0, 1, 255]);
});
