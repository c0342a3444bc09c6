import { readFile } from 'node:fs/promises';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Session } from '../../../app/contract.ts';
import { hasChromium } from './chromium.ts';
import { SAMPLE } from './served-window.ts';
import { type Visit, visit } from './visit.ts';

const picture = { width: 1280, height: 720 };

describe.skipIf(!hasChromium())('playing and stopping', { timeout: 300_000 }, () => {
  let here: Visit;
  let sample: Session;

  beforeAll(async () => {
    sample = JSON.parse(await readFile(SAMPLE.session, 'utf8'));
    here = await visit(SAMPLE.recording);
  });
  afterAll(() => here?.end());

  const button = (name: string) => here.bench.page.getByRole('button', { name, exact: true });
  const frameShown = () =>
    here.bench.page
      .locator('.picture-stage canvas')
      .getAttribute('aria-label')
      .then((label) => Number(/\d+/.exec(label ?? '')?.[0]));

  test('frames go on while it plays, and it stops on command', async () => {
    const { bench } = here;
    await bench.framed();
    await bench.press('Space');
    await button('Pause').waitFor();
    await expect.poll(() => bench.cursor()).toBeGreaterThan(0.3);
    const shown = await frameShown();
    await expect.poll(frameShown).toBeGreaterThan(shown);
    await bench.press('Space');
    await button('Play').waitFor();
    const stopped_s = await bench.cursor();
    // The picture comes to rest on the cursor's own frame, read anew at full size.
    await expect
      .poll(() => bench.page.locator('.picture-stage canvas').getAttribute('aria-label'))
      .toMatch(new RegExp(`at ${stopped_s.toFixed(3)} s$`));
    await bench.page.waitForTimeout(500);
    expect(await bench.cursor()).toBe(stopped_s);
  });

  test('it ends by itself at the end of the recording, on the last frame', async () => {
    const { bench } = here;
    const frames = Number(/([\d,]+) frames/.exec(await bench.fact('Length'))?.[1]);
    const lanes = await bench.page.locator('.lanes').boundingBox();
    if (!lanes) throw new Error('no time board');
    await bench.page.mouse.click(lanes.x + lanes.width * 0.993, lanes.y + 8);
    await expect.poll(() => bench.cursor()).toBeGreaterThan(100);
    await bench.press('Space');
    await button('Pause').waitFor();
    await button('Play').waitFor();
    await expect.poll(frameShown).toBe(frames - 1);
  });

  test('a segment plays from its start to its end', async () => {
    const { bench } = here;
    await bench.drawRegion(sample.views[0]!.region, picture);
    await bench.markSegment(20, 22.5);
    await bench.segments(1);
    const [start, end] = await Promise.all(['Start', 'End'].map((edge) => edgeTime(`${edge} of s01`)));
    await bench.page.locator('.lanes').focus();
    await bench.press('Shift+Space');
    await button('Pause').waitFor();
    await expect.poll(() => bench.cursor()).toBeGreaterThan(start! + 0.2);
    await button('Play').waitFor();
    const last_s = await bench.cursor();
    expect(last_s).toBeLessThan(end!);
    expect(last_s).toBeGreaterThan(end! - 0.2);
  });

  const edgeTime = async (name: string) =>
    Number(await here.bench.page.getByRole('slider', { name }).getAttribute('aria-valuenow'));

  test('following stops on command, keeps what was finished before, and can begin again', async () => {
    const { bench } = here;
    const line = bench.page.locator('.progress-words');
    const poses = bench.page.getByText(/\d+ poses of \d+ frames so far/);
    await bench.seeSheet('View');
    await bench.showStretch(5);
    await bench.followStretch();
    const before = await poses.innerText();

    await button('Follow again').click();
    await line.filter({ hasText: 'real time' }).waitFor();
    await bench.press('Escape');
    await line.waitFor({ state: 'detached' });
    await bench.page.locator('.notice', { hasText: 'stopped; the' }).waitFor();
    expect(await poses.innerText()).toBe(before);
    await expect.poll(() => button('Follow again').isEnabled()).toBe(true);
    await bench.page.getByRole('img', { name: 'Angle of the bar against time', exact: true }).waitFor();

    await button('Follow again').click();
    await line.filter({ hasText: 'real time' }).waitFor();
    await bench.page.locator('.work-line').getByRole('button', { name: 'Stop' }).click();
    await line.waitFor({ state: 'detached' });
    expect(await bench.page.locator('[role=alert]').allInnerTexts()).toEqual([]);
    expect(bench.complaints).toEqual([]);
  });
});
