import type { SessionSegment } from '../../contract.ts';
import { NumberField } from '../parts/number-field.tsx';
import { TextField } from '../parts/text-field.tsx';
import { changeSegment, type SegmentChange } from '../session-edits/segment-edits.ts';
import { focusEntry, leaveOut, selectNeighbour } from '../state/command-table.ts';
import { edit } from '../state/document.ts';
import { segments, views, whole_s } from '../state/selection.ts';
import { moveEdge } from '../time-board/segment-lane.tsx';

/** What the user says of a segment: current, its uncertainty, sweep, times, note, left out. */
export function SegmentEntry({ of: s }: { of: SessionSegment }) {
  const change = (label: string, next: SegmentChange, key: string) =>
    edit(`${label} of ${s.id}`, (all) => changeSegment(all, s.id, next), `${key} ${s.id}`);
  const last = segments.value.at(-1)?.id === s.id;
  return (
    <div class="entry-grid">
      <span class="entry-label">Current</span>
      <span class="entry-line">
        <NumberField
          key={`current ${s.id}`}
          label="Current"
          unit="A"
          value={s.current_A}
          optional
          entry="current"
          placeholder="not yet"
          onValue={(current_A) => change('Current', { current_A }, 'current')}
          onEnter={() => {
            if (last) return;
            selectNeighbour(1);
            requestAnimationFrame(() => focusEntry('current'));
          }}
        />
        <span aria-hidden="true">±</span>
        <NumberField
          key={`u ${s.id}`}
          label="Standard uncertainty of the current"
          unit="A"
          value={s.u_current_A ?? null}
          optional
          rule={{ least: 0 }}
          entry="u-current"
          placeholder="0"
          onValue={(u) => change('Uncertainty of the current', { u_current_A: u ?? undefined }, 'u')}
        />
        <Sweep of={s} onChange={(sweep) => change('Sweep', { sweep }, 'sweep')} />
      </span>
      <span class="entry-label">Stretch</span>
      <span class="entry-line">
        <NumberField
          key={`start ${s.id}`}
          label="Start"
          unit="s"
          value={s.start_s}
          rule={{ least: 0, most: whole_s.value }}
          entry="start"
          onValue={(t) => t !== null && moveEdge(s, 'start', t)}
        />
        <span aria-hidden="true">to</span>
        <NumberField
          key={`end ${s.id}`}
          label="End"
          unit="s"
          value={s.end_s}
          rule={{ least: 0, most: whole_s.value }}
          entry="end"
          onValue={(t) => t !== null && moveEdge(s, 'end', t)}
        />
        {views.value.length > 1 ? (
          <label class="inline">
            view
            <select value={s.view} onChange={(event) => change('View', { view: event.currentTarget.value }, 'view')}>
              {views.value.map((v) => (
                <option key={v.id} value={v.id}>
                  {v.id} ({v.kind})
                </option>
              ))}
            </select>
          </label>
        ) : null}
      </span>
      <span class="entry-label">Note</span>
      <span class="entry-line">
        <TextField
          key={`note ${s.id}`}
          label="Note"
          value={s.note ?? ''}
          class="wide"
          onValue={(note) => change('Note', { note: note === '' ? undefined : note }, 'note')}
        />
        <button
          type="button"
          aria-pressed={s.left_out !== undefined}
          onClick={() => void leaveOut()}
          title="Leave out of the reduction, or take in again (L)"
        >
          {s.left_out === undefined ? 'Leave out…' : 'Take in'}
        </button>
      </span>
      {s.left_out === undefined ? null : (
        <>
          <span class="entry-label">Left out</span>
          <TextField
            key={`left ${s.id}`}
            label="Reason for leaving it out"
            value={s.left_out}
            class="wide"
            onValue={(reason) => change('Reason', { left_out: reason }, 'left')}
          />
        </>
      )}
    </div>
  );
}

const SWEEPS = [
  ['rising', '▲', 'rising'],
  ['falling', '▼', 'falling'],
] as const;

function Sweep({ of: s, onChange }: { of: SessionSegment; onChange(sweep: SessionSegment['sweep']): void }) {
  return (
    <fieldset class="choice" aria-label="Step of the sweep">
      {SWEEPS.map(([value, sign, word]) => (
        <button
          key={value}
          type="button"
          aria-pressed={s.sweep === value}
          aria-label={word}
          title={`${word} step; press again for neither`}
          onClick={() => onChange(s.sweep === value ? undefined : value)}
        >
          <span aria-hidden="true">{sign}</span> <span class="word">{word}</span>
        </button>
      ))}
    </fieldset>
  );
}
