import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';

/** Where Debian puts Chromium; CHROMIUM_PATH names another. */
const USUAL_PATHS = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'];

const ARGUMENTS = [
  '--headless=new',
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** The Chromium that the window is tested in; null: there is none here. */
export function chromiumPath(): string | null {
  const named = process.env.CHROMIUM_PATH;
  return [...(named ? [named] : USUAL_PATHS)].find((path) => existsSync(path)) ?? null;
}

/** Says plainly that the window tests are left out; true where there is a Chromium. */
export function hasChromium(): boolean {
  if (chromiumPath() !== null) return true;
  console.warn('Window tests left out: no Chromium found (set CHROMIUM_PATH, or install Debian’s chromium).');
  return false;
}

/** Starts Chromium without a window of its own, with a new profile. */
export function startChromium(): Promise<Browser> {
  const executablePath = chromiumPath();
  if (executablePath === null) throw new Error('no Chromium');
  return chromium.launch({ executablePath, args: ARGUMENTS });
}
