import { findRecording, opening } from '../state/files.ts';
import { drawing } from '../state/picture-tools.ts';
import { recording, views } from '../state/selection.ts';
import { PictureStage } from './picture-stage.tsx';
import { PictureTools } from './picture-tools.tsx';

/** The current frame with the region and the followed bar drawn over it, and the tools below it. */
export function PicturePanel() {
  const r = recording.value;
  return (
    <section class="picture" aria-label="Picture">
      {r?.state === 'ready' ? <PictureStage /> : <div class="picture-stage">{r ? <NoPicture /> : null}</div>}
      {r?.state === 'ready' ? <Hint /> : null}
      <PictureTools />
    </section>
  );
}

/** What to do next on the picture, in one line; nothing where it is plain. */
function Hint() {
  if (drawing.value !== null) {
    return <p class="hint">Drag around the whole reach of the bar. Enter puts a region in the middle, Esc gives up.</p>;
  }
  if (views.value.length === 0) {
    return <p class="hint">Drag on the picture around the whole reach of the bar, or press R and Enter.</p>;
  }
  return null;
}

function NoPicture() {
  const r = recording.value;
  if (!r) return null;
  if (r.state === 'opening') return <p class="no-picture">Reading {r.name} …</p>;
  return (
    <div class="no-picture" role="alert">
      {r.state === 'missing' ? (
        <>
          <p>
            <b>{r.name}</b> is not where the session says. Everything else in the session is here; show where the
            recording is now and it is recognised by its content.
          </p>
          <button
            type="button"
            class="primary"
            disabled={opening.value !== null}
            onClick={() => void findRecording(r.id)}
          >
            Find {r.name} …
          </button>
        </>
      ) : (
        <p>{r.problem ?? `${r.name} can’t be used.`}</p>
      )}
    </div>
  );
}
