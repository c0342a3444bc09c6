import { existsSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Session } from '../../../app/contract.ts';
import type { BenchDriver } from './bench-driver.ts';
import { hasChromium } from './chromium.ts';
import { type Visit, visit } from './visit.ts';

const SHARED = resolve(import.meta.dirname, '../../../../shared/recordings');
const present = existsSync(join(SHARED, 'oblique_bench')) && existsSync(join(SHARED, 'side_near_end'));
if (!present) console.warn('Setting elevation, fibre line, half length and facing left out: no ../shared/recordings.');

interface Drawn {
  readonly session: Session;
  readonly file: string;
  /** The bar's true angle in every frame, degrees. */
  readonly angle_deg: readonly number[];
}

async function drawn(name: string): Promise<Drawn> {
  const session = JSON.parse(await readFile(join(SHARED, name, 'session.needlebeat.json'), 'utf8')) as Session;
  const [head = '', ...rows] = (await readFile(join(SHARED, name, 'frames.csv'), 'utf8')).trim().split('\n');
  const column = head.split(',').indexOf('angle_deg');
  const angle_deg = rows.map((row) => Number(row.split(',')[column]));
  return { session, file: join(SHARED, name, session.recordings[0]!.file), angle_deg };
}

/** Draws the region and says how the camera looks. */
async function drawView(bench: BenchDriver, session: Session, picture: { width: number; height: number }) {
  const view = session.views[0]!;
  await bench.drawRegion(view.region, picture);
  await bench.page.locator('.kinds label', { hasText: view.kind }).click();
  await bench.page.locator('[data-guide]').first().waitFor();
}

/** Waits until the bar is found in the frame at the cursor as it truly lies there, within so many degrees. */
async function foundAsDrawn(bench: BenchDriver, { angle_deg }: Drawn, within_deg: number): Promise<void> {
  const frame = /frame (\d+)/.exec(await bench.page.locator('.picture-tools .where').innerText())?.[1];
  const error_deg = async () =>
    Math.abs(plainNumber(/found at (\S+)°/.exec(await bench.barFound())?.[1] ?? 'none') - angle_deg[Number(frame)]!);
  await expect.poll(error_deg).toBeLessThan(within_deg);
}

/** Presses keys on a guide of the picture. */
async function nudge(bench: BenchDriver, guide: string, ...keys: string[]): Promise<void> {
  await bench.page.locator(`[data-guide="${guide}"]`).focus();
  await bench.press(...keys);
}

const plainNumber = (text: string) => Number(text.replace('\u2212', '-'));

async function saved(bench: BenchDriver): Promise<Session> {
  const files = await bench.downloads(() => bench.press('Control+s'), 1);
  return JSON.parse([...files.values()][0]!.toString()) as Session;
}

describe.skipIf(!hasChromium() || !present)('the elevation of an oblique view', { timeout: 300_000 }, () => {
  const picture = { width: 720, height: 1280 };
  let here: Visit;
  let bench: BenchDriver;
  let truth: Drawn;
  const elevation = () => bench.numberIn('elevation');

  beforeAll(async () => {
    truth = await drawn('oblique_bench');
    here = await visit(truth.file);
    bench = here.bench;
    await drawView(bench, truth.session, picture);
  });
  afterAll(() => here?.end());

  test('is set by dragging the level circle on the picture', async () => {
    await expect.poll(() => elevation()).toBe(45);
    const { x, y, width, height } = truth.session.views[0]!.region;
    const [middle, low] = [x + width / 2, y + height / 2];
    const height_px = (deg: number) => (width / 2) * Math.sin((deg * Math.PI) / 180);
    await bench.dragOnPicture([middle, low + height_px(45)], [middle, low + height_px(34)], picture);
    // The picture stands at less than half its size: a pixel of the pointer is about a degree.
    await expect.poll(async () => Math.abs((await elevation()) - 34)).toBeLessThan(1.5);
    await bench.press('Control+z');
    await expect.poll(elevation).toBe(45);
    await bench.press('Control+Shift+z');
    await expect.poll(async () => Math.abs((await elevation()) - 34)).toBeLessThan(1.5);
  });

  test('is set with the keyboard, in one step to undo, and turns the bar back to its true angle', async () => {
    await bench.type('elevation', '32');
    await nudge(bench, 'Elevation', 'ArrowUp', 'ArrowRight', 'Shift+ArrowDown', 'Shift+ArrowUp');
    await expect.poll(elevation).toBe(34);
    await foundAsDrawn(bench, truth, 1);
    await bench.press('Control+z');
    await expect.poll(elevation).toBe(32);
    await bench.press('Control+Shift+z');
    await expect.poll(elevation).toBe(34);
  });

  test('is set by dragging on the sketch and with its slider, and goes into the session file', async () => {
    const sketch = await bench.page.locator('svg.sketch').boundingBox();
    if (!sketch) throw new Error('no sketch');
    // The sketch is 220 wide with the bar at (70, 74): straight up from there is as high as it goes.
    const unit = sketch.width / 220;
    await bench.page.mouse.click(sketch.x + 70 * unit, sketch.y + 20 * unit);
    await expect.poll(elevation).toBe(85);
    await bench.page.getByLabel('Elevation, slider').focus();
    await bench.press('ArrowLeft');
    await expect.poll(elevation).toBe(84);
    await bench.type('elevation', '34,5');
    await expect.poll(elevation).toBe(34.5);
    expect((await saved(bench)).views[0]).toMatchObject({ kind: 'oblique', elevation_deg: 34.5 });
    expect(bench.complaints).toEqual([]);
  });
});

describe.skipIf(!hasChromium() || !present)('the guides of a side view', { timeout: 300_000 }, () => {
  const picture = { width: 1280, height: 720 };
  let here: Visit;
  let bench: BenchDriver;
  let truth: Drawn;
  let line_y: number;
  let middle_y: number;

  beforeAll(async () => {
    truth = await drawn('side_near_end');
    here = await visit(truth.file);
    bench = here.bench;
    await drawView(bench, truth.session, picture);
    const { y, height } = truth.session.views[0]!.region;
    const stage = await bench.page.locator('.picture-stage').boundingBox();
    if (!stage) throw new Error('no picture');
    const scale = Math.min(stage.width / picture.width, stage.height / picture.height);
    // The half length is drawn 16 pixels of the screen below the region.
    line_y = y + height + 16 / scale;
    middle_y = y + height / 2;
  });
  afterAll(() => here?.end());

  const near = (entry: string, value: number, within: number) =>
    expect.poll(async () => Math.abs((await bench.numberIn(entry)) - value), { message: entry }).toBeLessThan(within);

  test('fibre line, half length and facing are dragged on the picture', async () => {
    const axis = await bench.numberIn('axis');
    await bench.dragOnPicture([axis, middle_y - 30], [640, middle_y - 30], picture);
    await near('axis', 640, 2.5);
    const at = await bench.numberIn('axis');
    const third = truth.session.views[0]!.region.width / 3;
    await bench.dragOnPicture([at + third, line_y], [at + 140, line_y], picture);
    await near('half-length', 140, 3);
    const half = await bench.numberIn('half-length');
    await bench.dragOnPicture([at, line_y], [at + half * Math.sin(Math.PI / 6), line_y], picture);
    await near('facing', 30, 1.5);
    await bench.press('Control+z');
    await expect.poll(() => bench.entry('facing')).toBe('');
    await bench.press('Control+z');
    await expect.poll(() => bench.entry('half-length')).toBe('');
    await bench.press('Control+z');
    await expect.poll(() => bench.numberIn('axis')).toBe(axis);
    for (let i = 0; i < 3; i++) await bench.press('Control+Shift+z');
    await near('facing', 30, 1.5);
  });

  test('all three go by the arrow keys, one and ten at a time, and the bar is found at its true angle', async () => {
    await bench.type('axis', '650');
    await bench.type('half-length', '138,4');
    await bench.type('facing', '6,6');
    await nudge(bench, 'Fibre line', 'ArrowRight');
    await nudge(bench, 'Half length', 'Shift+ArrowUp');
    await nudge(bench, 'Facing', 'ArrowRight', 'ArrowLeft', 'ArrowUp');
    await near('axis', 651, 1e-9);
    await near('half-length', 148.4, 1e-9);
    await near('facing', 7.6, 1e-9);
    // In the first seconds a hand is in the picture.
    await bench.page.locator('.lanes').focus();
    await bench.press(...Array<string>(8).fill('Shift+ArrowRight'));
    await foundAsDrawn(bench, truth, 1);
  });

  test('facing is dragged on the sketch too, and the session file holds what was set', async () => {
    const sketch = await bench.page.locator('svg.sketch').boundingBox();
    if (!sketch) throw new Error('no sketch');
    // The sketch is 220 wide with the fibre at (110, 44), seen from above, the camera below.
    const unit = sketch.width / 220;
    await bench.page.mouse.click(sketch.x + 140 * unit, sketch.y + 74 * unit);
    await near('facing', 45, 1.5);
    await bench.type('facing', '\u22127,5');
    const [view] = (await saved(bench)).views;
    expect(view).toMatchObject({ kind: 'side', axis_x_px: 651, half_length_px: 148.4, facing_deg: -7.5 });
    expect(bench.complaints).toEqual([]);
  });
});
