import { computed, signal } from '@preact/signals';
import type { FitCurves, PreviewFit, Results, ResultsState, SegmentResult, SessionSegment } from '../../contract.ts';
import { host } from './host.ts';
import { segment } from './selection.ts';

/** What the host has measured; null until it has spoken. */
export const resultsState = signal<ResultsState | null>(null);

/** Results by the name of the segment. */
export const resultOf = computed<ReadonlyMap<string, SegmentResult>>(
  () => new Map((resultsState.value?.results?.segments ?? []).map((r) => [r.id, r])),
);

/** The reduction over all segments; null before there is one. */
export const reduction = computed<Results['reduction'] | null>(() => resultsState.value?.results?.reduction ?? null);

/** How a segment stands: what its symbol and word say everywhere in the window. */
export type Standing = 'measured' | 'doubtful' | 'unmeasured' | 'left-out' | 'waiting';

/** How a segment stands, from its result and the user's own decision. */
function standingFrom(
  s: SessionSegment,
  result: SegmentResult | undefined,
  waiting: boolean,
  problem: boolean,
): Standing {
  if (s.left_out !== undefined) return 'left-out';
  if (problem) return 'unmeasured';
  return waiting || !result ? 'waiting' : result.status;
}

/** How a segment of the session stands now. */
export const standingOf = (s: SessionSegment): Standing =>
  standingFrom(s, resultOf.value.get(s.id), waitingFor.value.has(s.id), problemOf.value.has(s.id));

/** Names of the segments whose numbers are still on their way. */
export const waitingFor = computed<ReadonlySet<string>>(
  () => new Set([...(resultsState.value?.pending ?? []), ...(resultsState.value?.stale ?? [])]),
);

/** Why a segment can't be measured as the session stands, by its name. */
export const problemOf = computed<ReadonlyMap<string, string>>(
  () => new Map((resultsState.value?.problems ?? []).map(({ segment: id, message }) => [id, message])),
);

/** Curves of measured segments, as far as they have been fetched. */
export const curves = signal<ReadonlyMap<string, FitCurves>>(new Map());

const fetched = new Map<string, SegmentResult>();
let fetching = false;

/** Takes results from the host and fetches the curves of segments whose result is new, one after the other. */
export function takeResults(state: ResultsState): void {
  resultsState.value = state;
  const present = new Set(state.results?.segments.map((r) => r.id) ?? []);
  if ([...curves.value.keys()].some((id) => !present.has(id))) {
    curves.value = new Map([...curves.value].filter(([id]) => present.has(id)));
  }
  for (const id of [...fetched.keys()]) if (!present.has(id)) fetched.delete(id);
  void fetchCurves();
}

async function fetchCurves(): Promise<void> {
  if (fetching) return;
  fetching = true;
  try {
    for (;;) {
      const next = nextToFetch();
      if (!next) return;
      fetched.set(next.id, next);
      const found = await host()
        .call('segmentCurves', { segment: next.id })
        .catch(() => null);
      const all = new Map(curves.value);
      if (found) all.set(next.id, found);
      else all.delete(next.id);
      curves.value = all;
    }
  } finally {
    fetching = false;
  }
}

/** The selected segment first, then the others in order. A result that says the same as before keeps its curves. */
function nextToFetch(): SegmentResult | null {
  const open = (resultsState.value?.results?.segments ?? []).filter((r) => {
    const had = fetched.get(r.id);
    return (
      !had || had.start_s !== r.start_s || had.end_s !== r.end_s || had.f0_Hz !== r.f0_Hz || had.frames !== r.frames
    );
  });
  return open.find((r) => r.id === segment.value?.id) ?? open[0] ?? null;
}

/** The quick fit that follows an edge while it is dragged, and for which stretch it stands. */
export interface Preview {
  readonly segment: string;
  readonly start_s: number;
  readonly end_s: number;
  readonly fit: PreviewFit;
}

export const preview = signal<Preview | null>(null);

let newest = 0;

/** Asks for a quick fit of a stretch; only the newest question counts. Nothing comes where the stretch hasn't been followed. */
export async function askPreview(of: { segment: string; view: string; start_s: number; end_s: number }): Promise<void> {
  const mine = ++newest;
  const { segment: id, ...stretch } = of;
  try {
    const fit = await host().call('previewFit', { ...stretch, lane: 'edge' });
    if (mine === newest) preview.value = { segment: id, start_s: of.start_s, end_s: of.end_s, fit };
  } catch {
    // A quick fit that can't be had is no mistake of the user's: the final one will say why.
  }
}

/** Puts the quick fit away. */
export function dropPreview(): void {
  newest++;
  preview.value = null;
}
