import type { SessionView } from '../../contract.ts';
import { bytesText, durationText, fixedText } from '../numbers/quantity-text.ts';
import { NumberField } from '../parts/number-field.tsx';
import { TextField } from '../parts/text-field.tsx';
import { removeView, replaceView, type ViewKind, viewOfKind } from '../session-edits/view-edits.ts';
import { bar, looking, viewDraft } from '../state/bar.ts';
import { span } from '../state/board.ts';
import { run } from '../state/command-table.ts';
import { edit, recordings, session } from '../state/document.ts';
import { follow, followedShare, following, stopFollowing } from '../state/following.ts';
import { drawing } from '../state/picture-tools.ts';
import { frame, frameTimes, recording, showRecording, showView, view, views, whole_s } from '../state/selection.ts';
import { traces } from '../state/traces.ts';
import { KindSketch } from './kind-sketch.tsx';

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

function RecordingPart() {
  const r = recording.value;
  const facts = r?.facts;
  const scale = session.value?.recordings.find((one) => one.id === r?.id);
  if (!r) return null;
  const bytes = facts && typeof facts['bytes'] === 'number' ? facts['bytes'] : null;
  return (
    <section>
      <header class="sheet-head">
        <h2>Recording</h2>
        {recordings.value.length > 1 ? (
          <select aria-label="Recording" value={r.id} onChange={(event) => showRecording(event.currentTarget.value)}>
            {recordings.value.map((one) => (
              <option key={one.id} value={one.id}>
                {one.id}: {one.name}
              </option>
            ))}
          </select>
        ) : (
          <span class="file-name">{r.name}</span>
        )}
      </header>
      <TextField
        label="Title of the session"
        class="wide"
        placeholder="Title of the session"
        value={session.value?.title ?? ''}
        onValue={(title) => edit('Title', (s) => ({ ...s, title }), 'title')}
      />
      {facts ? (
        <dl class="facts-list">
          <dt>Picture</dt>
          <dd>
            {facts.width_px} × {facts.height_px} px{facts.rotation_deg === 0 ? '' : `, turned ${facts.rotation_deg}°`}
          </dd>
          <dt>Length</dt>
          <dd>
            {fixedText(facts.duration_s, 2)} s{facts.duration_s >= 60 ? ` (${durationText(facts.duration_s)})` : ''},{' '}
            {facts.frames} frames
          </dd>
          <dt>Rate</dt>
          <dd>
            {fixedText(facts.measured_rate_Hz, 3)} frames/s measured{facts.rate_varies ? ', it varies' : ''}
            {facts.longest_gap_s === null ? '' : `; longest gap ${fixedText(facts.longest_gap_s * 1000, 0)} ms`}
          </dd>
          <dt>File</dt>
          <dd>
            {facts.container}, {facts.codec}
            {bytes === null ? '' : `, ${bytesText(bytes)}`}
          </dd>
          <dt>Clock</dt>
          <dd class="entry-line">
            <NumberField
              key={r.id}
              label="Time scale"
              unit=""
              value={scale?.time_scale ?? 1}
              rule={{ least: 0, aboveLeast: true }}
              onValue={(value) => value !== null && setClock(r.id, { time_scale: value === 1 ? undefined : value })}
            />
            <span aria-hidden="true">±</span>
            <NumberField
              key={`u ${r.id}`}
              label="Relative standard uncertainty of the time scale"
              unit="ppm"
              value={(scale?.u_time_scale ?? 2e-5) * 1e6}
              rule={{ least: 0 }}
              onValue={(ppm) => ppm !== null && setClock(r.id, { u_time_scale: ppm === 20 ? undefined : ppm / 1e6 })}
            />
          </dd>
        </dl>
      ) : null}
    </section>
  );
}

function setClock(id: string, change: { time_scale?: number | undefined; u_time_scale?: number | undefined }): void {
  edit('Clock of the recording', (s) => ({
    ...s,
    recordings: s.recordings.map((r) => {
      if (r.id !== id) return r;
      const merged = Object.entries({ ...r, ...change }).filter(([, value]) => value !== undefined);
      return Object.fromEntries(merged) as typeof r;
    }),
  }));
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

const KINDS: readonly (readonly [ViewKind, string])[] = [
  ['plan', 'along the fibre'],
  ['oblique', 'from above, at an angle'],
  ['side', 'from bench level'],
];

function ViewPart({ of: v }: { of: SessionView }) {
  const change = (label: string, next: SessionView, key?: string) =>
    edit(label, (s) => replaceView(s, next), key === undefined ? undefined : `${key} ${v.id}`);
  return (
    <>
      <div class="kinds" role="radiogroup" aria-label="How the camera looks at the bar">
        {KINDS.map(([kind, words]) => (
          <label key={kind} data-chosen={v.kind === kind || undefined}>
            <input
              type="radio"
              name="kind"
              checked={v.kind === kind}
              onChange={() => change(`View ${v.id}: ${kind}`, viewOfKind(v, kind))}
            />
            <b>{kind}</b>
            <span>{words}</span>
          </label>
        ))}
      </div>
      <div class="sketch-row">
        <KindSketch
          kind={v.kind}
          {...(v.kind === 'oblique' ? { elevation_deg: v.elevation_deg } : {})}
          {...(v.kind === 'side' ? { facing_deg: v.facing_deg ?? null } : {})}
        />
        <div class="sketch-fields">
          {v.kind === 'plan' ? (
            <p class="quiet">Nothing more to say: the bar turns in the picture as it turns on the fibre.</p>
          ) : null}
          {v.kind === 'oblique' ? <ObliqueFields of={v} change={change} /> : null}
          {v.kind === 'side' ? <SideFields of={v} change={change} /> : null}
        </div>
      </div>
      <RegionFields of={v} change={change} />
      <BarState of={v} />
    </>
  );
}

type Change = (label: string, next: SessionView, key?: string) => void;

function ObliqueFields({ of: v, change }: { of: Extract<SessionView, { kind: 'oblique' }>; change: Change }) {
  return (
    <>
      <NumberField
        key={v.id}
        label="Elevation"
        caption="Elevation"
        unit="°"
        value={v.elevation_deg}
        entry="elevation"
        rule={{ least: 0, aboveLeast: true, most: 90 }}
        onValue={(deg) => deg !== null && change('Elevation', { ...v, elevation_deg: deg }, 'elevation')}
      />
      <input
        type="range"
        aria-label="Elevation, slider"
        min="10"
        max="85"
        step="1"
        value={v.elevation_deg}
        onInput={(event) =>
          change('Elevation', { ...v, elevation_deg: Number(event.currentTarget.value) }, 'elevation')
        }
      />
    </>
  );
}

function SideFields({ of: v, change }: { of: Extract<SessionView, { kind: 'side' }>; change: Change }) {
  const without = (field: 'half_length_px' | 'facing_deg') =>
    Object.fromEntries(Object.entries(v).filter(([key]) => key !== field)) as typeof v;
  return (
    <>
      <NumberField
        key={`axis ${v.id}`}
        label="Fibre line"
        caption="Fibre line at"
        unit="px"
        value={v.axis_x_px}
        entry="axis"
        onValue={(px) => px !== null && change('Fibre line', { ...v, axis_x_px: px }, 'axis')}
      />
      <NumberField
        key={`half ${v.id}`}
        label="Half length"
        caption="Half length"
        unit="px"
        optional
        placeholder="needed for °"
        value={v.half_length_px ?? null}
        entry="half-length"
        rule={{ least: 0, aboveLeast: true }}
        onValue={(px) =>
          change('Half length', px === null ? without('half_length_px') : { ...v, half_length_px: px }, 'half')
        }
      />
      <NumberField
        key={`facing ${v.id}`}
        label="Facing"
        caption="Facing"
        unit="°"
        optional
        placeholder="unknown"
        value={v.facing_deg ?? null}
        entry="facing"
        rule={{ least: -90, most: 90 }}
        onValue={(deg) => change('Facing', deg === null ? without('facing_deg') : { ...v, facing_deg: deg }, 'facing')}
      />
      <input
        type="range"
        aria-label="Facing, slider"
        min="-90"
        max="90"
        step="1"
        value={v.facing_deg ?? 0}
        onInput={(event) => change('Facing', { ...v, facing_deg: Number(event.currentTarget.value) }, 'facing')}
      />
    </>
  );
}

function RegionFields({ of: v, change }: { of: SessionView; change: Change }) {
  const fields = [
    ['x', 'Left edge of the region', 'x'],
    ['y', 'Top edge of the region', 'y'],
    ['width', 'Width of the region', 'width'],
    ['height', 'Height of the region', 'height'],
  ] as const;
  return (
    <div class="region-fields" role="group" aria-label="Region">
      {fields.map(([key, label, caption]) => (
        <NumberField
          key={`${key} ${v.id}`}
          label={label}
          caption={caption}
          unit="px"
          value={v.region[key]}
          entry={`region-${key}`}
          rule={key === 'width' || key === 'height' ? { least: 16 } : { least: 0 }}
          onValue={(px) =>
            px !== null && change('Region', { ...v, region: { ...v.region, [key]: Math.round(px) } }, `region-${key}`)
          }
        />
      ))}
    </div>
  );
}

/** Whether the bar is found in the frame at the cursor. */
function BarState({ of: v }: { of: SessionView }) {
  const last = bar.value;
  const current = last && last.view === v.id && last.frame === frame.value ? last.found : null;
  return (
    <p class="bar-state" role="status" data-found={current?.found ?? undefined}>
      {current === null || looking.value
        ? 'Looking for the bar …'
        : current.found
          ? `Bar found at ${fixedText(current.angle, 1)}${current.unit === 'deg' ? '°' : ' px'}, quality ${fixedText(current.quality, 2)}.`
          : current.message}
    </p>
  );
}

function FollowPart({ of: v }: { of: SessionView }) {
  const now = following.value;
  const trace = traces.value.get(v.id);
  const part = span.value.end_s - span.value.start_s < whole_s.value - 0.01;
  const ready = recording.value?.state === 'ready';
  return (
    <section>
      <header class="sheet-head">
        <h2>Follow the bar</h2>
      </header>
      <p class="quiet">
        {trace?.length
          ? `${trace.length} poses of ${frameTimes.value?.length ?? 0} frames so far. Segments are measured by themselves, also where nothing was followed.`
          : 'Gives the angle over the whole recording, in which the steps can be seen and marked.'}
      </p>
      {now ? (
        <div class="entry-line">
          <progress max="1" value={followedShare.value} aria-label="Following" />
          <button type="button" disabled={now.stopping} onClick={() => void stopFollowing()}>
            {now.stopping ? 'Stopping …' : 'Stop'}
          </button>
        </div>
      ) : (
        <div class="entry-line">
          <button type="button" class="primary" disabled={!ready} onClick={() => void follow(v.id)}>
            {trace?.length ? 'Follow again' : 'Follow the whole recording'}
          </button>
          <button
            type="button"
            disabled={!ready || !part}
            onClick={() => void follow(v.id, span.value)}
            title="Only the stretch that the time board shows"
          >
            Stretch on the board
          </button>
        </div>
      )}
    </section>
  );
}
