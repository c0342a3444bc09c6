import { useEffect, useState } from 'preact/hooks';
import { edit, session } from '../state/document.ts';
import { withPart } from './apparatus-fields.ts';
import { Choice } from './choice.tsx';
import {
  type BodyKind,
  bodyFields,
  type Fibre,
  type FibreDraft,
  FREQUENCY_FIELD,
  fibreDraft,
  fibreLacks,
  fibreOf,
  LENGTH_FIELD,
  NEW_LENGTH,
  type RunDraft,
  type RunOrigin,
  STIFFNESS_FIELD,
  syncedDraft,
} from './fibre-fields.ts';
import { RigRow } from './rig-row.tsx';

const ORIGINS: readonly (readonly [RunOrigin, string])[] = [
  ['typed', 'frequency typed'],
  ['segment', 'a segment'],
];
const BODIES: readonly (readonly [BodyKind, string])[] = [
  ['magnet', 'the magnet itself'],
  ['cylinder', 'another cylinder'],
  ['bar', 'another rectangular bar'],
  ['inertia', 'a body of known inertia'],
];

/** The fibre: its stiffness as known, from a run without field, or from several lengths. */
export function FibrePart({ fibre }: { fibre: Fibre | undefined }) {
  const [draft, setDraft] = useState<FibreDraft>(() => fibreDraft(fibre));
  useEffect(() => setDraft((before) => syncedDraft(before, fibre)), [fibre]);

  function set(next: FibreDraft, key: string): void {
    setDraft(next);
    const whole = fibreOf(next);
    if (JSON.stringify(whole) === JSON.stringify(fibreOf(draft))) return;
    edit('Fibre', (s) => withPart(s, 'fibre', whole), `fibre ${key}`);
  }
  const setFree = (change: Partial<RunDraft>, key: string) =>
    set({ ...draft, free: { ...draft.free, ...change } }, key);
  const setLength = (i: number, change: Partial<RunDraft>, key: string) =>
    set({ ...draft, lengths: draft.lengths.map((run, k) => (k === i ? { ...run, ...change } : run)) }, `${key} ${i}`);

  const lacks = fibreLacks(draft);
  return (
    <div class="rig-part fibre">
      <RigRow
        field={STIFFNESS_FIELD}
        values={draft.values}
        onValue={(key, value) => set({ ...draft, values: { ...draft.values, [key]: value } }, key)}
      />
      <div class="rig-row">
        <span class="rig-label">Run without field</span>
        <Choice
          label="Frequency of the run without field"
          options={[['none', 'none'], ...ORIGINS]}
          value={draft.free.origin}
          onChange={(origin) => setFree({ origin }, 'free origin')}
        />
      </div>
      {draft.free.origin === 'none' ? null : (
        <>
          <Frequency run={draft.free} name="run without field" onChange={setFree} />
          <div class="rig-row">
            <span class="rig-label">The fibre turned back</span>
            <Choice
              label="What the fibre turned back in the run without field"
              options={BODIES}
              value={draft.body}
              onChange={(body) => set({ ...draft, body }, 'body')}
            />
          </div>
          {bodyFields(draft.body).map((field) => (
            <RigRow
              key={`${draft.body} ${field.key}`}
              field={{ ...field, label: `Its ${field.label.toLowerCase()}` }}
              entry={`body ${field.key}`}
              values={draft.bodyValues}
              onValue={(key, value) =>
                set({ ...draft, bodyValues: { ...draft.bodyValues, [key]: value } }, `body ${key}`)
              }
            />
          ))}
          <p class="quiet">
            {draft.body === 'magnet'
              ? 'The magnet where coils cancel the field of the place, or far from any: the fibre alone turns it back.'
              : 'A body that is not magnetic, best of the magnet’s mass, since some fibres are stiffer under more weight.'}
          </p>
        </>
      )}
      {draft.lengths.map((run, i) => (
        <fieldset key={i} class="fibre-run">
          <legend>
            Run on another length, {i + 1}
            <button
              type="button"
              aria-label={`Remove run ${i + 1}`}
              onClick={() => set({ ...draft, lengths: draft.lengths.filter((_, k) => k !== i) }, `remove ${i}`)}
            >
              Remove
            </button>
          </legend>
          <RigRow
            field={{ ...LENGTH_FIELD, label: 'Length of the fibre' }}
            name={`run ${i + 1}`}
            entry={`length ${i}`}
            values={run.values}
            onValue={(key, value) => setLength(i, { values: { ...run.values, [key]: value } }, key)}
          />
          <div class="rig-row">
            <span class="rig-label">Frequency from</span>
            <Choice
              label={`Frequency of run ${i + 1}`}
              options={ORIGINS}
              value={run.origin}
              onChange={(origin) => setLength(i, { origin }, 'origin')}
            />
          </div>
          <Frequency run={run} name={`run ${i + 1}`} onChange={(change, key) => setLength(i, change, key)} />
        </fieldset>
      ))}
      {draft.lengths.length === 0 ? null : (
        <RigRow
          field={LENGTH_FIELD}
          entry="fibre length"
          values={draft.values}
          onValue={(key, value) => set({ ...draft, values: { ...draft.values, [key]: value } }, key)}
        />
      )}
      <div class="rig-row">
        <span class="rig-label">Magnet on several lengths</span>
        <button type="button" onClick={() => set({ ...draft, lengths: [...draft.lengths, NEW_LENGTH] }, 'add')}>
          Add a length
        </button>
      </div>
      {lacks.length === 0 ? null : <p class="state-line">Still needed: {lacks.join(', ')}.</p>}
    </div>
  );
}

/** Frequency of a run: typed with its uncertainty, or the segment that shows it. */
function Frequency(props: { run: RunDraft; name: string; onChange(change: Partial<RunDraft>, key: string): void }) {
  const { run, name, onChange } = props;
  if (run.origin !== 'segment') {
    return (
      <RigRow
        field={FREQUENCY_FIELD}
        name={name}
        entry={`${name} f0_Hz`}
        values={run.values}
        onValue={(key, value) => onChange({ values: { ...run.values, [key]: value } }, `${name} ${key}`)}
      />
    );
  }
  const segments = session.value?.segments ?? [];
  return (
    <div class="rig-row">
      <span class="rig-label">Segment</span>
      <Choice
        label={`Segment of ${name}`}
        options={[['', 'choose…'], ...segments.map(({ id }) => [id, id] as const)]}
        value={run.segment}
        onChange={(segment) => onChange({ segment }, `${name} segment`)}
      />
    </div>
  );
}
