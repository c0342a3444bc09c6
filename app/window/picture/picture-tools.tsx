import { Icon } from '../parts/icons.tsx';
import { run } from '../state/command-table.ts';
import { drawing, lensOpen, zoomNow } from '../state/picture-tools.ts';
import { playing } from '../state/pictures.ts';
import { cursor_s, frame, frameTimes, recording } from '../state/selection.ts';

/** Below the picture: step and play, where the cursor is, magnification. */
export function PictureTools() {
  const r = recording.value;
  const ready = r?.state === 'ready';
  const frames = frameTimes.value?.length ?? 0;
  return (
    <div class="picture-tools" role="toolbar" aria-label="Picture tools">
      <span class="group">
        <button
          type="button"
          disabled={!ready}
          title="One frame back (←)"
          aria-label="One frame back"
          onClick={() => run('frame-back')}
        >
          <Icon name="back" />
        </button>
        <button
          type="button"
          disabled={!ready}
          title="Play or pause (Space)"
          aria-label={playing.value ? 'Pause' : 'Play'}
          onClick={() => run('play')}
        >
          <Icon name={playing.value ? 'pause' : 'play'} />
        </button>
        <button
          type="button"
          disabled={!ready}
          title="One frame on (→)"
          aria-label="One frame on"
          onClick={() => run('frame-forward')}
        >
          <Icon name="forward" />
        </button>
      </span>
      <output class="where" aria-label="Cursor">
        {ready ? (
          <>
            <b>{cursor_s.value.toFixed(3)} s</b>
            <span class="quiet">
              frame {frame.value ?? 0} of {frames}
            </span>
          </>
        ) : null}
      </output>
      <span class="group">
        <button
          type="button"
          class="with-word"
          disabled={!ready}
          aria-pressed={drawing.value !== null}
          title="Draw a region (R)"
          onClick={() => run('draw-region')}
        >
          <Icon name="region" /> Region
        </button>
        <button
          type="button"
          class="with-word"
          disabled={!ready}
          aria-pressed={lensOpen.value}
          title="A lens on the meter at the start of the selected segment"
          onClick={() => {
            lensOpen.value = !lensOpen.value;
          }}
        >
          <Icon name="lens" /> Lens
        </button>
      </span>
      <span class="group">
        <button
          type="button"
          disabled={!ready}
          title="Zoom out (-)"
          aria-label="Zoom out"
          onClick={() => run('zoom-out')}
        >
          <Icon name="minus" />
        </button>
        <output class="zoom" aria-label="Magnification">
          {ready ? `${Math.round(zoomNow().scale * 100)} %` : ''}
        </output>
        <button type="button" disabled={!ready} title="Zoom in (+)" aria-label="Zoom in" onClick={() => run('zoom-in')}>
          <Icon name="plus" />
        </button>
        <button
          type="button"
          disabled={!ready}
          title="Whole picture (0)"
          aria-label="Whole picture"
          onClick={() => run('zoom-fit')}
        >
          <Icon name="whole" />
        </button>
      </span>
    </div>
  );
}
