import { effect, signal } from '@preact/signals';
import type { BarFound, LooseView, SessionView } from '../../contract.ts';
import { host } from './host.ts';
import { playing } from './pictures.ts';
import { frame, recording, view } from './selection.ts';

/** The view as it is while a handle is being dragged; null: as in the session. */
export const viewDraft = signal<SessionView | null>(null);

/** Where the bar was found, for which view and frame; null: not looked for yet. */
export const bar = signal<{ readonly view: string; readonly frame: number; readonly found: BarFound } | null>(null);

/** True while the bar is being looked for. */
export const looking = signal(false);

const WAIT_MS = 250;

/** A view without what only the session needs. */
export function looseView(view: SessionView): LooseView {
  switch (view.kind) {
    case 'plan':
      return { kind: 'plan', region: view.region };
    case 'oblique':
      return { kind: 'oblique', region: view.region, elevation_deg: view.elevation_deg };
    case 'side':
      return {
        kind: 'side',
        region: view.region,
        axis_x_px: view.axis_x_px,
        half_length_px: view.half_length_px ?? null,
        facing_deg: view.facing_deg ?? null,
      };
    default:
      return view satisfies never;
  }
}

/** Looks for the bar whenever view or frame have come to rest; the newest question counts. */
export function keepBar(): () => void {
  let waiting: ReturnType<typeof setTimeout> | undefined;
  let asked: AbortController | null = null;
  const stop = effect(() => {
    const now = viewDraft.value ?? view.value;
    const at = frame.value;
    const r = recording.value;
    clearTimeout(waiting);
    asked?.abort();
    asked = null;
    if (!now || at === null || r?.state !== 'ready' || playing.value) return;
    waiting = setTimeout(() => {
      const mine = new AbortController();
      asked = mine;
      looking.value = true;
      host()
        .call('findBar', { recording: r.id, view: looseView(now), frame: at }, mine.signal)
        .then((found) => {
          bar.value = { view: now.id, frame: at, found };
        })
        .catch(() => null)
        .finally(() => {
          if (asked === mine || asked === null) looking.value = false;
        });
    }, WAIT_MS);
  });
  return () => {
    clearTimeout(waiting);
    asked?.abort();
    stop();
  };
}
