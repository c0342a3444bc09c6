import type { SessionView } from '../../contract.ts';
import { addView, replaceView, SMALLEST_REGION_PX, viewWithRegion } from '../session-edits/view-edits.ts';
import { viewDraft } from '../state/bar.ts';
import { edit } from '../state/document.ts';
import {
  drawing,
  lensDraft,
  lensNow,
  lensShown,
  panel,
  pictureSize,
  placeLens,
  zoom,
  zoomNow,
} from '../state/picture-tools.ts';
import { recording, sheet, showView, view } from '../state/selection.ts';
import {
  drawnHalfLength_px,
  elevationOf,
  facingWithEndAt,
  type ObliqueView,
  ovalOf,
  restingEnd_px,
  type SideView,
  sideLineY_px,
} from './guide-places.ts';
import { pannedBy, rectangleOnPanel, toPanel, toPicture } from './picture-zoom.ts';
import {
  between,
  type Handle,
  handleAt,
  isInside,
  moved,
  type Point,
  type Rectangle,
  withHandleMoved,
} from './region-shape.ts';

/** What a press on the picture takes hold of. */
export type Grip =
  | { readonly kind: 'draw' | 'lens' | 'lens-corner' | 'picture' }
  | { readonly kind: 'region' | 'axis' | 'facing' }
  | { readonly kind: 'region-handle'; readonly handle: Handle }
  | { readonly kind: 'half-length' | 'elevation'; readonly side: 1 | -1 };

/** A drag that has begun; points are panel coordinates. */
export interface Drag {
  to(at: Point): void;
  end(at: Point): void;
  giveUp(): void;
}

const REACH_PX = 8;
const SMALLEST_LENS_PX = 24;

/** What lies under a point of the panel, the smallest things first. `push`: the middle button moves the picture, whatever lies there. */
export function gripAt(at: Point, push: boolean): Grip {
  if (push) return { kind: 'picture' };
  const v = view.value;
  if (drawing.value !== null || !v) return { kind: 'draw' };
  const now = zoomNow();
  const region = rectangleOnPanel(now, v.region);
  const handle = handleAt(region, at, REACH_PX);
  if (handle) return { kind: 'region-handle', handle };
  if (lensShown()) {
    const lens = rectangleOnPanel(now, lensNow());
    if (handleAt(lens, at, REACH_PX) === 'se') return { kind: 'lens-corner' };
    if (isInside(lens, at) && !isInside(region, at)) return { kind: 'lens' };
  }
  const guide = v.kind === 'side' ? sideGripAt(v, at) : v.kind === 'oblique' ? obliqueGripAt(v, at) : null;
  return guide ?? (isInside(region, at) ? { kind: 'region' } : { kind: 'picture' });
}

function sideGripAt(v: SideView, at: Point): Grip | null {
  const now = zoomNow();
  const region = rectangleOnPanel(now, v.region);
  const near = (x_px: number) => Math.abs(at.x - (x_px * now.scale + now.x)) <= REACH_PX;
  const line_y = sideLineY_px(region, toPanel(now, { x: 0, y: pictureSize().height }).y);
  if (Math.abs(at.y - line_y) <= REACH_PX) {
    if (near(restingEnd_px(v))) return { kind: 'facing' };
    for (const side of [1, -1] as const) {
      if (near(v.axis_x_px + side * drawnHalfLength_px(v))) return { kind: 'half-length', side };
    }
  }
  return near(v.axis_x_px) && at.y >= region.y && at.y <= line_y ? { kind: 'axis' } : null;
}

function obliqueGripAt(v: ObliqueView, at: Point): Grip | null {
  const { middle, upright_px } = ovalOf(v, pictureSize());
  for (const side of [1, -1] as const) {
    const handle = toPanel(zoomNow(), { x: middle.x, y: middle.y + side * upright_px });
    if (Math.hypot(at.x - handle.x, at.y - handle.y) <= REACH_PX) return { kind: 'elevation', side };
  }
  return null;
}

/** Begins a drag; null where there is nothing to drag. */
export function dragFrom(grip: Grip, from: Point): Drag | null {
  const v = view.value;
  switch (grip.kind) {
    case 'draw':
      return drawDrag(from);
    case 'picture':
      return pictureDrag(from);
    case 'lens':
    case 'lens-corner':
      return lensDrag(grip.kind, from);
    case 'region':
    case 'region-handle':
    case 'axis':
    case 'facing':
    case 'half-length':
    case 'elevation':
      return v ? viewDrag(v, grip, from) : null;
    default:
      return grip satisfies never;
  }
}

function drawDrag(from: Point): Drag {
  const start = toPicture(zoomNow(), from);
  const region = (at: Point) => between(start, toPicture(zoomNow(), at), pictureSize());
  const id = recording.value?.id ?? '';
  return {
    to(at) {
      viewDraft.value = draftWith(region(at), id);
    },
    end(at) {
      viewDraft.value = null;
      setRegion(region(at));
    },
    giveUp() {
      viewDraft.value = null;
    },
  };
}

function draftWith(region: Rectangle, recordingId: string): SessionView | null {
  if (region.width < 2 || region.height < 2) return null;
  const v = drawing.value === 'new-view' ? null : view.value;
  return v ? viewWithRegion(v, region) : { id: 'new', recording: recordingId, kind: 'plan', region };
}

/** Takes a region that was drawn: for the view shown, or for a new one. One that is too small was a slip. */
export function setRegion(region: Rectangle): void {
  const r = recording.value;
  const v = drawing.value === 'new-view' ? null : view.value;
  if (!r || region.width < SMALLEST_REGION_PX || region.height < SMALLEST_REGION_PX) return;
  drawing.value = null;
  if (v) {
    edit('Draw the region', (s) => replaceView(s, viewWithRegion(v, region)));
    return;
  }
  let id: string | null = null;
  edit('Draw a region', (s) => {
    const added = addView(s, r.id, view.value?.kind ?? 'plan', region);
    id = added.id;
    return added.session;
  });
  if (id !== null) showView(id);
  sheet.value = 'view';
}

/** A region in the middle of the picture, for whoever has no pointer. */
export function middleRegion(): Rectangle {
  const { width, height } = pictureSize();
  const side = Math.round(Math.min(width, height) * 0.7);
  return { x: Math.round((width - side) / 2), y: Math.round((height - side) / 2), width: side, height: side };
}

function pictureDrag(from: Point): Drag {
  let before = from;
  return {
    to(at) {
      zoom.value = pannedBy(zoomNow(), at.x - before.x, at.y - before.y, pictureSize(), panel.value);
      before = at;
    },
    end() {},
    giveUp() {},
  };
}

function lensDrag(kind: 'lens' | 'lens-corner', from: Point): Drag {
  const start = lensNow();
  const shape = (at: Point): Rectangle => {
    const { scale } = zoomNow();
    const dx = (at.x - from.x) / scale;
    const dy = (at.y - from.y) / scale;
    return kind === 'lens'
      ? moved(start, dx, dy, pictureSize())
      : withHandleMoved(start, 'se', dx, dy, pictureSize(), SMALLEST_LENS_PX);
  };
  return {
    to(at) {
      lensDraft.value = shape(at);
    },
    end: (at) => placeLens(shape(at)),
    giveUp() {
      lensDraft.value = null;
    },
  };
}

type ViewGrip = Exclude<Grip, { kind: 'draw' | 'lens' | 'lens-corner' | 'picture' }>;

const LABELS = {
  region: 'Move the region',
  'region-handle': 'Resize the region',
  axis: 'Move the fibre line',
  facing: 'Set the facing',
  'half-length': 'Set the half length',
  elevation: 'Set the elevation',
};

function viewDrag(start: SessionView, grip: ViewGrip, from: Point): Drag {
  const shape = (at: Point): SessionView => {
    const { scale } = zoomNow();
    return draggedView(start, grip, (at.x - from.x) / scale, (at.y - from.y) / scale);
  };
  return {
    to(at) {
      viewDraft.value = shape(at);
    },
    end(at) {
      viewDraft.value = null;
      if (at.x !== from.x || at.y !== from.y) edit(LABELS[grip.kind], (s) => replaceView(s, shape(at)));
    },
    giveUp() {
      viewDraft.value = null;
    },
  };
}

/** The view after one of its grips has been dragged by (dx, dy) displayed pixels. */
export function draggedView(start: SessionView, grip: Grip, dx: number, dy: number): SessionView {
  const size = pictureSize();
  if (grip.kind === 'region') return viewWithRegion(start, moved(start.region, dx, dy, size));
  if (grip.kind === 'region-handle') {
    return { ...start, region: withHandleMoved(start.region, grip.handle, dx, dy, size, SMALLEST_REGION_PX) };
  }
  if (start.kind === 'oblique' && grip.kind === 'elevation') {
    const { across_px, upright_px } = ovalOf(start, size);
    return { ...start, elevation_deg: elevationOf(across_px, upright_px + grip.side * dy) };
  }
  if (start.kind !== 'side') return start;
  if (grip.kind === 'facing') return { ...start, facing_deg: facingWithEndAt(start, restingEnd_px(start) + dx) };
  if (grip.kind === 'axis') return { ...start, axis_x_px: Math.round(start.axis_x_px + dx) };
  if (grip.kind === 'half-length') {
    return { ...start, half_length_px: Math.max(2, Math.round(drawnHalfLength_px(start) + grip.side * dx)) };
  }
  return start;
}
