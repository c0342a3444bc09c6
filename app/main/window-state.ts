import { readFileSync } from 'node:fs';
import { z } from 'zod';
import { writeWhole } from '../../src/session/write-session.ts';

/** Where the window stood, in device-independent pixels. */
export interface WindowState {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
  readonly maximized: boolean;
}

interface Area {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

const whole = z.number().int();
const stateSchema = z.strictObject({ x: whole, y: whole, width: whole, height: whole, maximized: z.boolean() });

const SMALLEST = { width: 960, height: 640 };
const USUAL = { width: 1440, height: 900 };

/** Reads where the window stood; null where that isn't known. */
export function readWindowState(file: string): WindowState | null {
  try {
    return stateSchema.parse(JSON.parse(readFileSync(file, 'utf8')));
  } catch {
    return null;
  }
}

/** Remembers where the window stands. */
export async function writeWindowState(file: string, state: WindowState): Promise<void> {
  await writeWhole(file, `${JSON.stringify(state)}\n`);
}

/**
 * Where to put the window: where it stood if enough of its title bar can be seen there, else in the middle of the first screen.
 * @param screens work areas of the screens there are, the first one first.
 */
export function placeWindow(state: WindowState | null, screens: readonly Area[]): WindowState {
  const first = screens[0] ?? { x: 0, y: 0, ...USUAL };
  const width = Math.max(SMALLEST.width, Math.min(state?.width ?? USUAL.width, widest(screens)));
  const height = Math.max(SMALLEST.height, Math.min(state?.height ?? USUAL.height, tallest(screens)));
  if (state && screens.some((screen) => showsTitle({ ...state, width }, screen))) {
    return { ...state, width, height };
  }
  const middle = (start: number, room: number, size: number) => start + Math.max(0, Math.round((room - size) / 2));
  return {
    x: middle(first.x, first.width, width),
    y: middle(first.y, first.height, height),
    width,
    height,
    maximized: state?.maximized ?? false,
  };
}

/** Enough of the title bar to take hold of the window. */
function showsTitle(window: Area, screen: Area): boolean {
  const overlap = Math.min(window.x + window.width, screen.x + screen.width) - Math.max(window.x, screen.x);
  return overlap >= 120 && window.y >= screen.y - 10 && window.y <= screen.y + screen.height - 40;
}

function widest(screens: readonly Area[]): number {
  return Math.max(SMALLEST.width, ...screens.map((s) => s.width));
}
function tallest(screens: readonly Area[]): number {
  return Math.max(SMALLEST.height, ...screens.map((s) => s.height));
}
