import { signal } from '@preact/signals';

/** Where a segment begun with the keyboard starts, seconds; null: none has been begun. */
export const markStart = signal<number | null>(null);
