import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { hasChromium } from './chromium.ts';
import { SAMPLE } from './served-window.ts';
import { type Visit, visit } from './visit.ts';

describe.skipIf(!hasChromium())('files dropped on the window', { timeout: 300_000 }, () => {
  let here: Visit;
  let folder: string;

  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'needlebeat-drops-'));
    here = await visit();
  });
  afterAll(async () => {
    await here?.end();
    await rm(folder, { recursive: true, force: true });
  });

  test('a file that is neither recording nor session is refused with a sentence that names it', async () => {
    const bad = join(folder, 'shopping list.txt');
    await writeFile(bad, 'bread');
    await here.bench.drop(bad);
    expect((await here.bench.mistakes()).join(' ')).toContain('shopping list.txt');
    await here.bench.page.getByRole('button', { name: 'Put away' }).first().click();
  });

  test('a recording opens with its facts and its first picture', async () => {
    await here.bench.drop(SAMPLE.recording);
    await here.bench.framed();
    await expect.poll(() => here.bench.fact('Picture')).toBe('1280 × 720 px');
    await expect.poll(() => here.bench.fact('File')).toContain('mp4');
  });

  test('what isn’t saved is asked for before anything replaces it', async () => {
    const { bench } = here;
    await bench.press('r', 'Enter');
    const left = await bench.entry('region-x');
    const question = bench.page.getByRole('dialog', { name: 'Save the session first?' });
    await bench.drop(SAMPLE.session);
    await question.getByRole('button', { name: 'Cancel' }).click();
    await question.waitFor({ state: 'detached' });
    await expect.poll(() => bench.entry('region-x')).toBe(left);
    await bench.drop(SAMPLE.session);
    await question.getByRole('button', { name: 'Don’t save' }).click();
    await question.waitFor({ state: 'detached' });
  });

  test('a session alone shows its segments and asks for its recording, which is taken when it is dropped', async () => {
    const { bench } = here;
    await bench.page.getByRole('button', { name: /Find boathouse.mp4/ }).waitFor();
    await bench.segments(11);
    await bench.drop(SAMPLE.recording);
    await bench.framed();
    await bench.segments(11);
    await bench.seeSheet('View');
    expect(await bench.page.locator('select[aria-label="Recording"]').count()).toBe(0);
  });

  test('a session and its recording dropped together belong together', async () => {
    const { bench } = here;
    await bench.choose('File', 'Close the session');
    const question = bench.page.getByRole('button', { name: 'Don’t save' });
    const empty = bench.page.getByRole('button', { name: 'Open the demo session' });
    await question.or(empty).first().waitFor();
    if (await question.isVisible()) await question.click();
    await empty.waitFor();
    await bench.drop(SAMPLE.recording, SAMPLE.session);
    await bench.framed();
    await bench.segments(11);
    await bench.seeSheet('View');
    expect(await bench.page.locator('select[aria-label="Recording"]').count()).toBe(0);
    expect(bench.complaints).toEqual([]);
  });
});
