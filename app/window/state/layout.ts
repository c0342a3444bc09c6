import { computed, effect, signal } from '@preact/signals';
import type { Layout, Result } from '../../contract.ts';
import { host } from './host.ts';
import { type Sheet, sheet } from './selection.ts';

/** Share of the width that each sheet takes until the user drags its edge: the field sheet's table needs most. */
const chosen = signal<Readonly<Record<Sheet, number>>>({ view: 0.34, segment: 0.34, field: 0.52, apparatus: 0.34 });

/** Share of the width that the open sheet takes, 0 to 1. */
export const sheetShare = computed(() => chosen.value[sheet.value]);

/** Share of the height that the time board takes, 0 to 1. */
export const boardShare = signal(0.3);

/** Sets the share of the open sheet's width or of the board's height, within reason. */
export function setShare(way: 'sheet' | 'board', share: number): void {
  if (way === 'sheet') chosen.value = { ...chosen.value, [sheet.value]: sheetWithin(share) };
  else boardShare.value = boardWithin(share);
}

const sheetWithin = (share: number) => Math.min(Math.max(share, 0.22), 0.75);
const boardWithin = (share: number) => Math.min(Math.max(share, 0.2), 0.6);

/** Lays the panes out as they were in the last window. */
export function takeLayout({ sheets, board }: Layout): void {
  const { view, segment, field, apparatus } = sheets;
  chosen.value = {
    view: sheetWithin(view),
    segment: sheetWithin(segment),
    field: sheetWithin(field),
    apparatus: sheetWithin(apparatus),
  };
  boardShare.value = boardWithin(board);
}

const REST_MS = 400;

/** Has the host keep the layout for the next start whenever it has come to rest. */
export function keepLayout(): () => void {
  let waiting: ReturnType<typeof setTimeout> | undefined;
  let kept: string | null = null;
  const stop = effect(() => {
    const layout: Layout = { sheets: chosen.value, board: boardShare.value, sheet: sheet.value };
    const text = JSON.stringify(layout);
    clearTimeout(waiting);
    if (kept === null) kept = text;
    if (text === kept) return;
    waiting = setTimeout(() => {
      kept = text;
      // Where it can't be kept the next window looks as a new one does: nothing to bother the user with.
      void host()
        .call('keepLayout', { layout })
        .catch((): Result<'keepLayout'> => ({}));
    }, REST_MS);
  });
  return () => {
    clearTimeout(waiting);
    stop();
  };
}
