import type { Recording, Region } from './recording.ts';

/** The same rectangle in the picture as stored, before it is turned for display. Throws RangeError where the region isn't whole pixels within the picture. */
export function storedRegion(
  recording: Pick<Recording, 'width_px' | 'height_px' | 'rotation_deg'>,
  region: Region,
): Region {
  checkRegion(recording, region);
  const { x, y, width, height } = region;
  const right = recording.width_px - x - width;
  const below = recording.height_px - y - height;
  switch (recording.rotation_deg) {
    case 0:
      return region;
    case 90:
      return { x: y, y: right, width: height, height: width };
    case 180:
      return { x: right, y: below, width, height };
    case 270:
      return { x: below, y: x, width: height, height: width };
    default:
      return recording.rotation_deg satisfies never;
  }
}

/** ffmpeg filters that turn a stored picture, or a part of it, for display. */
export function turningFilters(rotation_deg: Recording['rotation_deg']): readonly string[] {
  switch (rotation_deg) {
    case 0:
      return [];
    case 90:
      return ['transpose=clock'];
    case 180:
      return ['hflip', 'vflip'];
    case 270:
      return ['transpose=cclock'];
    default:
      return rotation_deg satisfies never;
  }
}

function checkRegion(recording: Pick<Recording, 'width_px' | 'height_px'>, region: Region): void {
  const { x, y, width, height } = region;
  const whole = [x, y, width, height].every(Number.isInteger);
  const within = x >= 0 && y >= 0 && x + width <= recording.width_px && y + height <= recording.height_px;
  if (!whole || !within || width < 1 || height < 1) {
    throw new RangeError(
      `region: expected whole pixels within ${recording.width_px} x ${recording.height_px}, got ${width} x ${height} at (${x}, ${y})`,
    );
  }
}
