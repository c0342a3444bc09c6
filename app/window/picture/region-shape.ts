/** A rectangle in displayed pixels of the full-size frame. */
export interface Rectangle {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export interface Point {
  readonly x: number;
  readonly y: number;
}

export interface Size {
  readonly width: number;
  readonly height: number;
}

/** The handles of a region by points of the compass, in the order of the tabulator key. */
export const HANDLES = ['nw', 'n', 'ne', 'e', 'se', 's', 'sw', 'w'] as const;
export type Handle = (typeof HANDLES)[number];

/** Where a handle stands on its rectangle. */
export function handlePoint(r: Rectangle, handle: Handle): Point {
  const x = handle.includes('w') ? r.x : handle.includes('e') ? r.x + r.width : r.x + r.width / 2;
  const y = handle.startsWith('n') ? r.y : handle.startsWith('s') ? r.y + r.height : r.y + r.height / 2;
  return { x, y };
}

/** The handle within `reach` of a point, corners first; null where there is none. */
export function handleAt(r: Rectangle, point: Point, reach: number): Handle | null {
  const ordered = [...HANDLES].sort((a, b) => b.length - a.length);
  return (
    ordered.find((handle) => {
      const at = handlePoint(r, handle);
      return Math.abs(at.x - point.x) <= reach && Math.abs(at.y - point.y) <= reach;
    }) ?? null
  );
}

/** Whether a point lies within a rectangle. */
export function isInside(r: Rectangle, point: Point): boolean {
  return point.x >= r.x && point.x <= r.x + r.width && point.y >= r.y && point.y <= r.y + r.height;
}

/** The rectangle between two corners, in whole pixels inside the picture. */
export function between(a: Point, b: Point, picture: Size): Rectangle {
  const left = clamp(Math.round(Math.min(a.x, b.x)), 0, picture.width);
  const top = clamp(Math.round(Math.min(a.y, b.y)), 0, picture.height);
  const right = clamp(Math.round(Math.max(a.x, b.x)), 0, picture.width);
  const bottom = clamp(Math.round(Math.max(a.y, b.y)), 0, picture.height);
  return { x: left, y: top, width: right - left, height: bottom - top };
}

/** A rectangle with one handle dragged by (dx, dy): whole pixels, inside the picture, never smaller than `least`. */
export function withHandleMoved(
  r: Rectangle,
  handle: Handle,
  dx: number,
  dy: number,
  picture: Size,
  least: number,
): Rectangle {
  let left = r.x;
  let top = r.y;
  let right = r.x + r.width;
  let bottom = r.y + r.height;
  if (handle.includes('w')) left = clamp(Math.round(left + dx), 0, right - least);
  if (handle.includes('e')) right = clamp(Math.round(right + dx), left + least, picture.width);
  if (handle.startsWith('n')) top = clamp(Math.round(top + dy), 0, bottom - least);
  if (handle.startsWith('s')) bottom = clamp(Math.round(bottom + dy), top + least, picture.height);
  return { x: left, y: top, width: right - left, height: bottom - top };
}

/** A rectangle moved by (dx, dy), kept whole inside the picture. */
export function moved(r: Rectangle, dx: number, dy: number, picture: Size): Rectangle {
  return {
    ...r,
    x: clamp(Math.round(r.x + dx), 0, Math.max(0, picture.width - r.width)),
    y: clamp(Math.round(r.y + dy), 0, Math.max(0, picture.height - r.height)),
  };
}

function clamp(value: number, least: number, most: number): number {
  return Math.min(Math.max(value, least), most);
}
