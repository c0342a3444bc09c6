import { computed, signal } from '@preact/signals';
import { type Sheet, sheet } from './selection.ts';

/** Share of the width that each sheet takes until the user drags its edge: the field sheet's table needs most. */
const chosen = signal<Readonly<Record<Sheet, number>>>({ view: 0.34, segment: 0.34, field: 0.52, apparatus: 0.34 });

/** Share of the width that the open sheet takes, 0 to 1. */
export const sheetShare = computed(() => chosen.value[sheet.value]);

/** Share of the height that the time board takes, 0 to 1. */
export const boardShare = signal(0.3);

/** Sets the share of the open sheet's width or of the board's height, within reason. */
export function setShare(way: 'sheet' | 'board', share: number): void {
  if (way === 'sheet') chosen.value = { ...chosen.value, [sheet.value]: Math.min(Math.max(share, 0.22), 0.75) };
  else boardShare.value = Math.min(Math.max(share, 0.2), 0.6);
}
