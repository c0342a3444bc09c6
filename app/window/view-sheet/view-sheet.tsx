import type { SessionView } from '../../contract.ts';
import { removeView } from '../session-edits/view-edits.ts';
import { viewDraft } from '../state/bar.ts';
import { run } from '../state/command-table.ts';
import { edit, session } from '../state/document.ts';
import { drawing } from '../state/picture-tools.ts';
import { recording, showView, view, views } from '../state/selection.ts';
import { FollowPart } from './follow-part.tsx';
import { RecordingPart } from './recording-part.tsx';
import { ViewPart } from './view-part.tsx';

/** The recording's facts, the view with its region, and following the bar. */
export function ViewSheet() {
  const r = recording.value;
  if (!r) return null;
  const v = viewDraft.value ?? view.value;
  return (
    <div class="view-sheet">
      <RecordingPart />
      <section>
        <header class="sheet-head">
          <h2>View</h2>
          {views.value.length > 0 ? (
            <select aria-label="View" value={view.value?.id} onChange={(event) => showView(event.currentTarget.value)}>
              {views.value.map((one) => (
                <option key={one.id} value={one.id}>
                  {one.id} ({one.kind})
                </option>
              ))}
            </select>
          ) : null}
          <span class="spacer" />
          {view.value ? (
            <>
              <button
                type="button"
                aria-pressed={drawing.value === 'new-view'}
                onClick={() => {
                  drawing.value = drawing.value === 'new-view' ? null : 'new-view';
                }}
              >
                New view
              </button>
              <RemoveView of={view.value} />
            </>
          ) : null}
        </header>
        {v && view.value ? <ViewPart of={v} /> : <NoView />}
      </section>
      {view.value ? <FollowPart of={view.value} /> : null}
    </div>
  );
}

function NoView() {
  return (
    <div class="next-step">
      <p>
        Draw a <b>region</b> around the whole reach of the bar: drag on the picture, or press R and then Enter for one
        in the middle. The bar found in it is drawn over the picture at once.
      </p>
      <button
        type="button"
        class="primary"
        disabled={recording.value?.state !== 'ready'}
        onClick={() => run('draw-region')}
      >
        Draw the region
      </button>
    </div>
  );
}

function RemoveView({ of: v }: { of: SessionView }) {
  const used = session.value?.segments.filter((s) => s.view === v.id).length ?? 0;
  return (
    <button
      type="button"
      disabled={used > 0}
      title={used > 0 ? `${used} segments are followed in it` : 'Delete this view'}
      onClick={() => edit(`Delete view ${v.id}`, (s) => removeView(s, v.id))}
    >
      Delete
    </button>
  );
}
