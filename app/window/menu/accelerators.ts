/** A key press as far as shortcuts care. */
export interface KeyPress {
  readonly key: string;
  readonly code: string;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly shiftKey: boolean;
  readonly altKey: boolean;
}

const KEYS: Readonly<Record<string, string>> = {
  Left: 'ArrowLeft',
  Right: 'ArrowRight',
  Up: 'ArrowUp',
  Down: 'ArrowDown',
  Space: ' ',
  Esc: 'Escape',
};

const NAMES: Readonly<Record<string, string>> = {
  Left: '←',
  Right: '→',
  Up: '↑',
  Down: '↓',
  '-': '−',
  PageUp: 'Page Up',
  PageDown: 'Page Down',
};

interface Parts {
  readonly key: string;
  readonly command: boolean;
  readonly shift: boolean;
}

function partsOf(accelerator: string): Parts {
  const pieces = accelerator === '+' ? ['+'] : accelerator.split('+');
  return {
    key: pieces.at(-1) ?? '',
    command: pieces.includes('CmdOrCtrl'),
    shift: pieces.includes('Shift'),
  };
}

/** Whether a key press is the shortcut, written in the notation of the contract's commands. */
export function matches(press: KeyPress, accelerator: string, mac: boolean): boolean {
  const { key, command, shift } = partsOf(accelerator);
  if (press.altKey || (mac ? press.metaKey : press.ctrlKey) !== command) return false;
  if (!command && (press.ctrlKey || press.metaKey)) return false;
  // Signs such as + stand on different keys with or without Shift, so only the sign counts; digits go by their key.
  if (/^[+-]$/.test(key)) return press.key === key || (key === '+' && press.key === '=');
  if (press.shiftKey !== shift) return false;
  if (/^\d$/.test(key)) return press.key === key || press.code === `Digit${key}` || press.code === `Numpad${key}`;
  const wanted = KEYS[key] ?? key;
  return press.key.toLowerCase() === wanted.toLowerCase();
}

/** Whether a shortcut also counts while a text field has the keyboard. */
export function worksInFields(accelerator: string): boolean {
  return partsOf(accelerator).command || accelerator === 'F1';
}

/** A shortcut as people read it. */
export function keysText(accelerator: string, mac = false): string {
  const { key, command, shift } = partsOf(accelerator);
  const pieces = [command ? (mac ? '⌘' : 'Ctrl') : '', shift ? 'Shift' : '', NAMES[key] ?? key];
  return pieces.filter((piece) => piece !== '').join('+');
}
