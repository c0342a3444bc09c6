import type { Session, SessionView } from '../../../src/session/session.ts';

export type ViewKind = SessionView['kind'];
export type ViewRegion = SessionView['region'];

/** The smallest region that a bar can be followed in, displayed pixels across. */
export const SMALLEST_REGION_PX = 16;

/** Elevation that a new oblique view starts with, degrees: half-way between bench and fibre. */
const USUAL_ELEVATION_DEG = 45;

/** The first free name of the row v1, v2, … */
export function freeViewId(session: Session): string {
  const taken = new Set(session.views.map((v) => v.id));
  for (let n = session.views.length + 1; ; n++) if (!taken.has(`v${n}`)) return `v${n}`;
}

/** A session with one view more. */
export function addView(
  session: Session,
  recording: string,
  kind: ViewKind,
  region: ViewRegion,
): { readonly session: Session; readonly id: string } {
  const id = freeViewId(session);
  const view = viewOfKind({ id, recording, kind: 'plan', region }, kind);
  return { session: { ...session, views: [...session.views, view] }, id };
}

/** A session in which a view is replaced by `view`, which carries its id. */
export function replaceView(session: Session, view: SessionView): Session {
  return { ...session, views: session.views.map((v) => (v.id === view.id ? view : v)) };
}

/** A session without a view; null while segments still use it. */
export function removeView(session: Session, id: string): Session | null {
  if (session.segments.some((s) => s.view === id)) return null;
  return { ...session, views: session.views.filter((v) => v.id !== id) };
}

/** The same region looked at in another way; fields that only the new kind has start from what the region suggests. */
export function viewOfKind(view: SessionView, kind: ViewKind): SessionView {
  if (view.kind === kind) return view;
  const { id, recording, region } = view;
  switch (kind) {
    case 'plan':
      return { id, recording, kind, region };
    case 'oblique':
      return { id, recording, kind, region, elevation_deg: USUAL_ELEVATION_DEG };
    case 'side':
      return { id, recording, kind, region, axis_x_px: Math.round(region.x + region.width / 2) };
    default:
      return kind satisfies never;
  }
}

/** The view moved to another region; a fibre line inside a `side` view moves along with it. */
export function viewWithRegion(view: SessionView, region: ViewRegion): SessionView {
  if (view.kind !== 'side') return { ...view, region };
  const by = Math.round(region.x + region.width / 2 - (view.region.x + view.region.width / 2));
  const moved = region.width === view.region.width && region.height === view.region.height;
  return { ...view, region, axis_x_px: moved ? view.axis_x_px + by : view.axis_x_px };
}
