import { bytesText, durationText, fixedText } from '../numbers/quantity-text.ts';
import { NumberField } from '../parts/number-field.tsx';
import { TextField } from '../parts/text-field.tsx';
import { edit, recordings, session } from '../state/document.ts';
import { recording, showRecording } from '../state/selection.ts';

/** Name and facts of the recording shown, the session's title, and the recording's clock. */
export function RecordingPart() {
  const r = recording.value;
  const facts = r?.facts;
  const scale = session.value?.recordings.find((one) => one.id === r?.id);
  if (!r) return null;
  const bytes = facts && typeof facts.bytes === 'number' ? facts.bytes : null;
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
            {containerName(facts.container, r.name)}, {facts.codec}
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

/** One of the demuxer's names for the container: that of the file's ending where it is among them. */
function containerName(names: string, file: string): string {
  const all = names.split(',');
  return all.find((name) => file.toLowerCase().endsWith(`.${name}`)) ?? all[0] ?? names;
}
