import type { Browser, BrowserContext, Download, Page } from 'playwright-core';
import { expect } from 'vitest';

/** A stretch of picture in displayed pixels. */
interface Region {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** Nothing that the tests wait for takes so long even where the processor has much else to do. */
const LONGEST_WAIT_MS = 150_000;

/** What one user does at the bench, in a real browser: the tests speak only through this. */
export class BenchDriver {
  readonly page: Page;
  /** Errors and warnings of the browser's console, violations of the security policy among them. */
  readonly complaints: string[];
  readonly #context: BrowserContext;

  private constructor(context: BrowserContext, page: Page, complaints: string[]) {
    this.#context = context;
    this.page = page;
    this.complaints = complaints;
  }

  static async enter(browser: Browser, address: string, size = { width: 1440, height: 900 }): Promise<BenchDriver> {
    const context = await browser.newContext({ viewport: size, colorScheme: 'light', acceptDownloads: true });
    const page = await context.newPage();
    page.setDefaultTimeout(LONGEST_WAIT_MS);
    const complaints: string[] = [];
    page.on('console', (message) => {
      if (message.type() === 'error' || message.type() === 'warning') complaints.push(message.text());
    });
    page.on('pageerror', (error) => complaints.push(String(error.stack ?? error)));
    await page.goto(address);
    return new BenchDriver(context, page, complaints);
  }

  async leave(): Promise<void> {
    await this.#context.close();
  }

  /** Picks a file through the button of the empty window. */
  async openFile(path: string): Promise<void> {
    const chooser = this.page.waitForEvent('filechooser');
    await this.page.getByRole('button', { name: 'Open a recording or session' }).click();
    await (await chooser).setFiles(path);
  }

  async seeSheet(name: 'View' | 'Segment' | 'Field' | 'Apparatus'): Promise<void> {
    await this.page.getByRole('tab', { name }).click();
  }

  /** What a label of the open sheet says, e.g. the facts of the recording. */
  fact(name: string): Promise<string> {
    return this.page.locator('.facts-list dt', { hasText: name }).locator('+ dd').innerText();
  }

  /** Drops files on the window as a file manager does. */
  async drop(...paths: string[]): Promise<void> {
    const devtools = await this.#context.newCDPSession(this.page);
    const data = { items: [], files: paths, dragOperationsMask: 1 };
    const send = (type: 'dragEnter' | 'dragOver' | 'drop') =>
      devtools.send('Input.dispatchDragEvent', { type, x: 400, y: 300, data });
    await send('dragEnter');
    await send('dragOver');
    await this.page.locator('.drop-veil').waitFor();
    await send('drop');
    await this.page.locator('.drop-veil').waitFor({ state: 'detached' });
    await devtools.detach();
  }

  /** Waits until a frame is shown, and drags a rectangle over the picture. */
  async drawRegion(region: Region, picture: { width: number; height: number }): Promise<void> {
    await this.framed();
    const { x, y, width, height } = region;
    await this.dragOnPicture([x, y], [x + width, y + height], picture);
  }

  /** Waits until a frame is on the panel. */
  async framed(): Promise<void> {
    await this.page.locator('.picture-stage canvas[aria-label^="Frame"]').waitFor();
  }

  /** Drags over the picture, which lies whole on its panel, between two places in displayed pixels. */
  async dragOnPicture(
    from: readonly [number, number],
    to: readonly [number, number],
    picture: { width: number; height: number },
  ): Promise<void> {
    const stage = await this.#box('.picture-stage');
    const scale = Math.min(stage.width / picture.width, stage.height / picture.height);
    const left = stage.x + (stage.width - picture.width * scale) / 2;
    const top = stage.y + (stage.height - picture.height * scale) / 2;
    const at = ([x, y]: readonly [number, number]) => [left + x * scale, top + y * scale] as const;
    await this.#drag(at(from), at(to));
  }

  /** Number of an entry of the open sheet. */
  async numberIn(entry: string): Promise<number> {
    return plainNumber(await this.entry(entry));
  }

  /** Where the cursor stands, seconds. */
  async cursor(): Promise<number> {
    return Number.parseFloat(await this.page.locator('.picture-tools .where b').innerText());
  }

  /** Waits for the sentence about the bar in the frame shown. */
  async barFound(): Promise<string> {
    const words = await this.page.waitForFunction(
      () => document.querySelector<HTMLElement>('.bar-state[data-found]')?.innerText,
    );
    return (await words.jsonValue()) ?? '';
  }

  /** Follows the stretch that the board shows, to its end; gives the words of the progress line seen on the way. */
  async followStretch(): Promise<string[]> {
    const seen = new Set<string>();
    await this.page.getByRole('button', { name: 'Stretch on the board' }).click();
    await this.page.locator('.progress-words').waitFor();
    for (;;) {
      const words = await this.page.locator('.progress-words').allInnerTexts();
      if (words.length === 0) break;
      for (const one of words) seen.add(one);
      await this.page.waitForTimeout(150);
    }
    return [...seen];
  }

  /** Shows a stretch on the board by the scroll bar's words: zooms with the wheel until it is about that long. */
  async showStretch(end_s: number): Promise<void> {
    const lanes = await this.#box('.lanes');
    await this.page.mouse.move(lanes.x + 1, lanes.y + 80);
    for (let now = await this.span(); now.end_s > end_s; ) {
      await this.page.mouse.wheel(0, -60);
      const before = now.end_s;
      await expect.poll(async () => (await this.span()).end_s).toBeLessThan(before);
      now = await this.span();
    }
  }

  /** The stretch that the board shows. */
  async span(): Promise<{ start_s: number; end_s: number; whole_s: number }> {
    const words = (await this.page.getByRole('scrollbar').getAttribute('aria-valuetext')) ?? '';
    const [start_s = 0, end_s = 0, whole_s = 0] = [...words.matchAll(/[\d.]+/g)].map(Number);
    return { start_s, end_s, whole_s };
  }

  /** Marks a segment by dragging over the angle lane. */
  async markSegment(start_s: number, end_s: number): Promise<void> {
    await this.#drag(await this.#onBoard(start_s), await this.#onBoard(end_s));
  }

  /** Drags an edge of a segment to another time. */
  async dragEdge(from_s: number, to_s: number): Promise<void> {
    await this.#drag(await this.#onBoard(from_s), await this.#onBoard(to_s));
  }

  /** What a screen reader says of the segments on the board, once there are so many; what is to be in their names is waited for with a poll. */
  async segments(count: number): Promise<string[]> {
    await expect
      .poll(async () => (await this.#segmentNames()).length, { message: 'segments on the board' })
      .toBe(count);
    return this.#segmentNames();
  }

  /** Waits until the sheet of a segment lies open. */
  async atSegment(id: string): Promise<void> {
    await this.page.getByRole('heading', { name: `Segment ${id}`, exact: true }).waitFor();
  }

  #segmentNames(): Promise<string[]> {
    return this.page
      .locator('.bracket-name')
      .evaluateAll((all) => all.map((one) => one.getAttribute('aria-label') ?? ''));
  }

  /** Selects a segment on the board. */
  async selectSegment(id: string): Promise<void> {
    await this.page.locator(`.bracket[data-segment="${id}"] .bracket-name`).click();
    await this.page.locator(`.bracket[data-segment="${id}"][data-chosen]`).waitFor();
  }

  /** Types into an entry of the open sheet and takes it with Enter. */
  async type(entry: string, text: string): Promise<void> {
    const field = this.page.locator(`[data-entry="${entry}"]`);
    await field.fill(text);
    await field.press('Enter');
  }

  entry(entry: string): Promise<string> {
    return this.page.locator(`[data-entry="${entry}"]`).inputValue();
  }

  /** Waits until every one of so many segments on the board has been measured. */
  async measured(count: number, timeout = LONGEST_WAIT_MS): Promise<void> {
    await this.page.waitForFunction(
      (wanted) => {
        const marks = [...document.querySelectorAll('.bracket .standing')];
        return marks.length === wanted && marks.every((mark) => (mark as HTMLElement).dataset.standing !== 'waiting');
      },
      count,
      { timeout },
    );
  }

  /** A row of numbers of the segment sheet as value and uncertainty. */
  async number(name: string): Promise<{ value: number; u: number; unit: string }> {
    const row = this.page.locator('table.numbers tr', { hasText: name });
    const [value = '', u = '', unit = ''] = await row.locator('td').allInnerTexts();
    return { value: plainNumber(value), u: plainNumber(u), unit };
  }

  /** The cells of a row of the results table. */
  row(id: string): Promise<string[]> {
    return this.page.locator(`tr[data-row="${id}"] > *`).allInnerTexts();
  }

  /** What has the keyboard: the name of its entry field, else its words. */
  focused(): Promise<string> {
    return this.page.evaluate(() => {
      const one = document.activeElement as HTMLElement | null;
      return one?.dataset.entry ?? (one instanceof HTMLInputElement ? 'a field' : (one?.textContent ?? ''));
    });
  }

  /** Gives a command by its shortcut. */
  async press(...keys: string[]): Promise<void> {
    for (const key of keys) await this.page.keyboard.press(key);
  }

  /** Gives a command of the menus by its words. */
  async choose(menu: string, item: string): Promise<void> {
    await this.page.getByRole('menuitem', { name: menu, exact: true }).click();
    await this.page.getByRole('menuitem', { name: item }).click();
  }

  /** The files that an action hands over, as name and bytes, once none has come for a while. */
  async downloads(action: () => Promise<void>, count: number): Promise<Map<string, Buffer>> {
    const arrived: Download[] = [];
    const take = (download: Download) => arrived.push(download);
    this.page.on('download', take);
    await action();
    await expect.poll(() => arrived.length, { timeout: LONGEST_WAIT_MS }).toBeGreaterThanOrEqual(count);
    await this.page.waitForTimeout(300);
    this.page.off('download', take);
    const files = new Map<string, Buffer>();
    for (const download of arrived) {
      const chunks: Buffer[] = [];
      for await (const chunk of await download.createReadStream()) chunks.push(chunk as Buffer);
      files.set(download.suggestedFilename(), Buffer.concat(chunks));
    }
    return files;
  }

  /** The page in another tab that an action has the browser print; the dialog itself is only counted. */
  async printed(action: () => Promise<void>): Promise<{ title: string; text: string; prints: number }> {
    await this.#context.addInitScript(() => {
      const counted = globalThis as { prints?: number };
      window.print = () => {
        counted.prints = (counted.prints ?? 0) + 1;
      };
    });
    const opened = this.#context.waitForEvent('page');
    await action();
    const tab = await opened;
    const prints = () => tab.evaluate(() => (globalThis as { prints?: number }).prints ?? 0);
    await expect.poll(prints).toBeGreaterThan(0);
    const found = { title: await tab.title(), text: await tab.locator('body').innerText(), prints: await prints() };
    await tab.close();
    return found;
  }

  /** What the clipboard holds, pasted into a field as a user would. */
  async pasted(): Promise<string> {
    await this.page.evaluate(() =>
      document.body.append(Object.assign(document.createElement('textarea'), { id: 'paste' })),
    );
    const field = this.page.locator('#paste');
    await field.focus();
    await this.page.keyboard.press('Control+v');
    await expect.poll(() => field.inputValue()).not.toBe('');
    const text = await field.inputValue();
    await field.evaluate((one) => one.remove());
    return text;
  }

  /** Sentences about mistakes that are on the window. */
  async mistakes(): Promise<string[]> {
    await this.page.locator('[role=alert]').first().waitFor();
    return this.page.locator('[role=alert]').allInnerTexts();
  }

  /** Controls of the window that a screen reader would have no name for. */
  nameless(): Promise<string[]> {
    return this.page.evaluate(() => {
      const controls = document.querySelectorAll<HTMLElement>(
        'button, input, select, [role=button], [role=slider], [role=option], [role=tab], [role=separator], [role=scrollbar], [tabindex="0"], canvas, dialog',
      );
      const named = (one: HTMLElement) =>
        one.getAttribute('aria-label') ||
        one.getAttribute('aria-labelledby') ||
        one.closest('label') ||
        (one.id && document.querySelector(`label[for="${CSS.escape(one.id)}"]`)) ||
        one.textContent?.trim();
      return [...controls]
        .filter((one) => one.checkVisibility() && !one.parentElement?.closest('[role=img]') && !named(one))
        .map((one) => one.outerHTML.slice(0, 120));
    });
  }

  async #onBoard(time_s: number): Promise<readonly [number, number]> {
    const lanes = await this.#box('.lanes');
    const { start_s, end_s } = await this.span();
    return [lanes.x + ((time_s - start_s) / (end_s - start_s)) * lanes.width, lanes.y + 110];
  }

  async #box(selector: string): Promise<{ x: number; y: number; width: number; height: number }> {
    const box = await this.page.locator(selector).boundingBox();
    if (!box) throw new Error(`${selector} is not on the window`);
    return box;
  }

  async #drag(from: readonly [number, number], to: readonly [number, number]): Promise<void> {
    await this.page.mouse.move(...from);
    await this.page.mouse.down();
    await this.page.mouse.move((from[0] + to[0]) / 2, (from[1] + to[1]) / 2, { steps: 4 });
    await this.page.mouse.move(...to, { steps: 4 });
    await this.page.mouse.up();
  }
}

function plainNumber(text: string): number {
  return Number(text.replace('±', '').replace('\u2212', '-').trim());
}
