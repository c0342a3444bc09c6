import { signal } from '@preact/signals';

/** Colours of what is painted on a canvas, read from the style sheet. */
export interface Colours {
  readonly ink: string;
  readonly quiet: string;
  readonly line: string;
  readonly faint: string;
  readonly accent: string;
  readonly data: string;
  readonly fit: string;
  readonly second: string;
  readonly panel: string;
}

const NAMES: readonly (keyof Colours)[] = ['ink', 'quiet', 'line', 'faint', 'accent', 'data', 'fit', 'second', 'panel'];

function read(): Colours {
  const style = getComputedStyle(document.documentElement);
  return Object.fromEntries(
    NAMES.map((name) => [name, style.getPropertyValue(`--${name}`).trim()]),
  ) as unknown as Colours;
}

const dark = matchMedia('(prefers-color-scheme: dark)');

/** The colours in force; a new object when the system turns light or dark. */
export const colours = signal<Colours>(read());

/** True while the system asks for dark. */
export const isDark = signal(dark.matches);

dark.addEventListener('change', () => {
  isDark.value = dark.matches;
  colours.value = read();
});

/** Reads the colours anew: the style sheet has arrived. */
export function readColours(): void {
  colours.value = read();
}
