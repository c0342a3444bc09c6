import type { Point, Rectangle, Size } from './region-shape.ts';

/** How the picture lies on its panel: panel = picture * scale + offset, panel in CSS pixels, picture in displayed pixels. */
export interface PictureZoom {
  readonly scale: number;
  readonly x: number;
  readonly y: number;
}

/** The largest magnification: one pixel of the picture over so many CSS pixels. */
export const LARGEST_SCALE = 16;

/** The picture as large as the panel allows, in its middle. */
export function fitted(picture: Size, panel: Size): PictureZoom {
  const scale = Math.min(panel.width / picture.width, panel.height / picture.height);
  return {
    scale,
    x: (panel.width - picture.width * scale) / 2,
    y: (panel.height - picture.height * scale) / 2,
  };
}

/** Magnifies by `factor` so that the point of the picture under `at` (panel coordinates) stays there. */
export function zoomedAbout(zoom: PictureZoom, at: Point, factor: number, picture: Size, panel: Size): PictureZoom {
  const least = fitted(picture, panel).scale;
  const scale = Math.min(Math.max(zoom.scale * factor, least), Math.max(LARGEST_SCALE, least));
  const kept = toPicture(zoom, at);
  return settled({ scale, x: at.x - kept.x * scale, y: at.y - kept.y * scale }, picture, panel);
}

/** Moves the picture by panel pixels. */
export function pannedBy(zoom: PictureZoom, dx: number, dy: number, picture: Size, panel: Size): PictureZoom {
  return settled({ ...zoom, x: zoom.x + dx, y: zoom.y + dy }, picture, panel);
}

/** A point of the panel in the picture's pixels. */
export function toPicture(zoom: PictureZoom, at: Point): Point {
  return { x: (at.x - zoom.x) / zoom.scale, y: (at.y - zoom.y) / zoom.scale };
}

/** A point of the picture on the panel. */
export function toPanel(zoom: PictureZoom, at: Point): Point {
  return { x: at.x * zoom.scale + zoom.x, y: at.y * zoom.scale + zoom.y };
}

/** A rectangle of the picture on the panel. */
export function rectangleOnPanel(zoom: PictureZoom, r: Rectangle): Rectangle {
  return { ...toPanel(zoom, r), width: r.width * zoom.scale, height: r.height * zoom.scale };
}

/** No empty band beside a picture that is larger than the panel; in the middle where it is smaller. */
function settled(zoom: PictureZoom, picture: Size, panel: Size): PictureZoom {
  return {
    scale: zoom.scale,
    x: settledAlong(zoom.x, picture.width * zoom.scale, panel.width),
    y: settledAlong(zoom.y, picture.height * zoom.scale, panel.height),
  };
}

function settledAlong(offset: number, length: number, room: number): number {
  if (length <= room) return (room - length) / 2;
  return Math.min(0, Math.max(room - length, offset));
}
