import { useEffect, useRef, useState } from 'preact/hooks';
import type { SessionSegment } from '../../contract.ts';
import { nearestIndex } from '../plots/extremes.ts';
import { host } from '../state/host.ts';
import { lensNow } from '../state/picture-tools.ts';
import { bitmapOf } from '../state/pictures.ts';
import { frameTimes, recording } from '../state/selection.ts';

const WIDTH_PX = 480;

/** What the lens sees in the first frame of a segment, so that a meter in the picture can be read. */
export function LensView({ of: s }: { of: SessionSegment }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const place = lensNow();
  const times = frameTimes.value;
  const ready = recording.value?.state === 'ready' && times !== null && times.length > 0;
  const frame = ready ? nearestIndex(times, s.start_s) : 0;

  useEffect(() => {
    if (!ready) return;
    const asked = new AbortController();
    const waiting = setTimeout(async () => {
      try {
        const crop = { x: place.x, y: place.y, width: place.width, height: place.height };
        const picture = await host().call(
          'picture',
          { recording: s.recording, frame, maxWidth_px: WIDTH_PX, crop },
          asked.signal,
        );
        const bitmap = await bitmapOf(picture);
        const surface = canvas.current;
        if (!surface || asked.signal.aborted) return bitmap.close();
        surface.width = bitmap.width;
        surface.height = bitmap.height;
        surface.getContext('2d')?.drawImage(bitmap, 0, 0);
        bitmap.close();
        setProblem(null);
      } catch (error) {
        if (!asked.signal.aborted) setProblem(error instanceof Error ? error.message : 'No picture.');
      }
    }, 60);
    return () => {
      clearTimeout(waiting);
      asked.abort();
    };
  }, [ready, s.recording, frame, place.x, place.y, place.width, place.height]);

  return (
    <figure class="lens-view">
      <canvas ref={canvas} role="img" aria-label={`Lens on the picture at the start of ${s.id}`} />
      <figcaption>
        {problem ?? (
          <>
            <b>Lens</b> on the picture at {s.start_s.toFixed(2)} s. Drag its frame to the meter to read the current.
          </>
        )}
      </figcaption>
    </figure>
  );
}
