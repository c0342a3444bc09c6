import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { axisEnds } from '../../../../app/window/picture/axis-ends.ts';
import { fitted, pannedBy, toPanel, toPicture, zoomedAbout } from '../../../../app/window/picture/picture-zoom.ts';
import {
  between,
  HANDLES,
  handleAt,
  handlePoint,
  moved,
  withHandleMoved,
} from '../../../../app/window/picture/region-shape.ts';

const picture = { width: 1280, height: 720 };
const panel = { width: 900, height: 600 };
const region = { x: 100, y: 200, width: 300, height: 150 };

describe('a region', () => {
  test('is drawn between any two corners, in whole pixels inside the picture', () => {
    expect(between({ x: 400.4, y: 350.2 }, { x: 99.6, y: 200 }, picture)).toEqual({
      x: 100,
      y: 200,
      width: 300,
      height: 150,
    });
    expect(between({ x: -50, y: 600 }, { x: 50, y: 900 }, picture)).toEqual({ x: 0, y: 600, width: 50, height: 120 });
  });

  test('stays inside the picture and at least as large as asked, whatever its handles are dragged by', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...HANDLES),
        fc.integer({ min: -3000, max: 3000 }),
        fc.integer({ min: -3000, max: 3000 }),
        (handle, dx, dy) => {
          const r = withHandleMoved(region, handle, dx, dy, picture, 16);
          expect(r.x).toBeGreaterThanOrEqual(0);
          expect(r.y).toBeGreaterThanOrEqual(0);
          expect(r.x + r.width).toBeLessThanOrEqual(picture.width);
          expect(r.y + r.height).toBeLessThanOrEqual(picture.height);
          expect(Math.min(r.width, r.height)).toBeGreaterThanOrEqual(16);
          const m = moved(region, dx, dy, picture);
          expect([m.width, m.height]).toEqual([300, 150]);
          expect(m.x >= 0 && m.x + m.width <= picture.width && m.y >= 0 && m.y + m.height <= picture.height).toBe(true);
        },
      ),
    );
  });

  test('each handle is found where it stands', () => {
    for (const handle of HANDLES) expect(handleAt(region, handlePoint(region, handle), 5)).toBe(handle);
    expect(handleAt(region, { x: 250, y: 275 }, 5)).toBeNull();
  });
});

describe('the picture on its panel', () => {
  test('fits, in the middle', () => {
    expect(fitted(picture, panel)).toEqual({ scale: 900 / 1280, x: 0, y: (600 - 720 * (900 / 1280)) / 2 });
  });

  test('the point under the pointer stays while the picture is magnified', () => {
    const at = { x: 500, y: 320 };
    const before = toPicture(fitted(picture, panel), at);
    const after = toPicture(zoomedAbout(fitted(picture, panel), at, 3, picture, panel), at);
    expect(after.x).toBeCloseTo(before.x, 9);
    expect(after.y).toBeCloseTo(before.y, 9);
  });

  test('never shows an empty band beside a picture larger than the panel', () => {
    const near = zoomedAbout(fitted(picture, panel), { x: 450, y: 300 }, 4, picture, panel);
    expect(toPanel(pannedBy(near, 9999, 9999, picture, panel), { x: 0, y: 0 })).toEqual({ x: 0, y: 0 });
    const corner = toPanel(pannedBy(near, -9999, -9999, picture, panel), { x: 1280, y: 720 });
    expect(corner.x).toBeCloseTo(900, 9);
    expect(corner.y).toBeCloseTo(600, 9);
  });

  test('doesn’t shrink below the whole picture', () => {
    expect(zoomedAbout(fitted(picture, panel), { x: 1, y: 1 }, 0.01, picture, panel).scale).toBeCloseTo(900 / 1280, 12);
  });
});

test('the axis drawn over the picture turns anticlockwise as seen, flattened in an oblique view', () => {
  const plan = { id: 'v', recording: 'A', kind: 'plan' as const, region: { x: 0, y: 0, width: 300, height: 300 } };
  const [a, b] = axisEnds(plan, { x: 150, y: 150 }, 90);
  expect([a.x, a.y, b.x, b.y].map(Math.round)).toEqual([150, 250, 150, 50]);
  const [, far] = axisEnds({ ...plan, kind: 'oblique', elevation_deg: 30 }, { x: 150, y: 150 }, 90);
  expect(Math.round(far.y)).toBe(100);
});
