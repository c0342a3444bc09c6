import { BenchDriver } from './bench-driver.ts';
import { startChromium } from './chromium.ts';
import { serveWindow } from './served-window.ts';

/** A program that serves its window, a browser, and a user in it. */
export interface Visit {
  readonly bench: BenchDriver;
  /** Ends all three. */
  end(): Promise<void>;
}

/** Starts the program and lets a user in. @param file what is named on its command line; null: nothing. */
export async function visit(file: string | null = null, size = { width: 1440, height: 900 }): Promise<Visit> {
  const browser = await startChromium();
  const served = await serveWindow(file ?? undefined);
  const bench = await BenchDriver.enter(browser, served.address, size);
  return {
    bench,
    async end() {
      await bench.leave();
      await browser.close();
      await served.close();
    },
  };
}
