import { signal } from '@preact/signals';

/** One short message at the lower edge of the window. A mistake stays until it is put away, a word goes by itself. */
export interface Notice {
  readonly key: number;
  readonly kind: 'word' | 'mistake';
  readonly text: string;
}

const WORD_LASTS_MS = 5000;
const MOST_NOTICES = 4;

/** What is being said, oldest first. */
export const notices = signal<readonly Notice[]>([]);

let nextKey = 1;

/** Says that something was done; it disappears after a few seconds. */
export function tell(text: string): void {
  const key = say('word', text);
  setTimeout(() => putAway(key), WORD_LASTS_MS);
}

/** Says what went wrong; stays until the user puts it away. The same sentence isn't said twice. */
export function tellMistake(text: string): void {
  if (!notices.value.some((n) => n.kind === 'mistake' && n.text === text)) say('mistake', text);
}

/** Takes a notice away. */
export function putAway(key: number): void {
  notices.value = notices.value.filter((n) => n.key !== key);
}

function say(kind: Notice['kind'], text: string): number {
  const key = nextKey++;
  notices.value = [...notices.value, { key, kind, text }].slice(-MOST_NOTICES);
  return key;
}
