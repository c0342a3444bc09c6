import { signal } from '@preact/signals';
import { fitted, type PictureZoom, zoomedAbout } from '../picture/picture-zoom.ts';
import type { Rectangle, Size } from '../picture/region-shape.ts';
import { recording, segment } from './selection.ts';

/** What the next drag on the picture draws: the region of the view shown, or that of a new view; null: nothing. */
export const drawing = signal<'region' | 'new-view' | null>(null);

/** Size of the panel that the picture lies on, CSS pixels. */
export const panel = signal<Size>({ width: 640, height: 360 });

/** How the picture lies on the panel; null: as large as fits. */
export const zoom = signal<PictureZoom | null>(null);

/** Whether the segment sheet shows the picture through the lens. */
export const lensOpen = signal(true);

/** Where the lens was put last, displayed pixels, by recording. */
const lensPlaces = signal<ReadonlyMap<string, Rectangle>>(new Map());

/** The lens while it is being dragged. */
export const lensDraft = signal<Rectangle | null>(null);

/** Size of the picture shown, displayed pixels. */
export function pictureSize(): Size {
  const facts = recording.value?.facts;
  return { width: facts?.width_px ?? 16, height: facts?.height_px ?? 9 };
}

/** How the picture lies on the panel now. */
export function zoomNow(): PictureZoom {
  return zoom.value ?? fitted(pictureSize(), panel.value);
}

/** Magnifies about the middle of the panel; 0: the whole picture again. */
export function zoomPicture(factor: number): void {
  const { width, height } = panel.value;
  const middle = { x: width / 2, y: height / 2 };
  zoom.value = factor === 0 ? null : zoomedAbout(zoomNow(), middle, factor, pictureSize(), panel.value);
}

/** The part of the picture that the lens looks at; where the user hasn't placed it: the lower right. */
export function lensNow(): Rectangle {
  const placed = lensDraft.value ?? lensPlaces.value.get(recording.value?.id ?? '');
  if (placed) return placed;
  const { width, height } = pictureSize();
  const side = Math.round(Math.min(width, height) / 4);
  return { x: width - Math.round(side * 1.6) - 8, y: height - side - 8, width: Math.round(side * 1.6), height: side };
}

/** Puts the lens there for good. */
export function placeLens(place: Rectangle): void {
  const id = recording.value?.id;
  if (id !== undefined) lensPlaces.value = new Map(lensPlaces.value).set(id, place);
  lensDraft.value = null;
}

/** Whether the lens is drawn over the picture: it belongs to the segment whose sheet is open. */
export const lensShown = (): boolean => lensOpen.value && segment.value !== null;
