import { useState } from 'preact/hooks';
import { type PlannedStep, planSweep, type SweepPlan } from '../../../src/reduction/plan-sweep.ts';
import { readList } from '../numbers/list-entry.ts';
import { entryText, fixedText } from '../numbers/quantity-text.ts';
import { NumberField } from '../parts/number-field.tsx';
import { TextField } from '../parts/text-field.tsx';
import { session } from '../state/document.ts';
import { reduction } from '../state/results.ts';
import { recording } from '../state/selection.ts';

const USUAL_CURRENTS_A = [0, 0.05, 0.1, 0.2, 0.35, 0.5];
const USUAL_REMANENCE_T = 1.2;
const USUAL_FIELD_T = 20e-6;

const LACKING: Readonly<Record<Extract<SweepPlan, { ok: false }>['lacks'][number], string>> = {
  coil: 'the coils',
  magnet: 'the magnet',
  moment: 'the moment',
  ambient: 'the field',
};

/** Before the bench: what to expect at each current, how long to let the bar ring down, how fast to film. */
export function PlanPart() {
  const found = reduction.value;
  const [field_T, setField] = useState<number | null>(null);
  const [moment_A_m2, setMoment] = useState<number | null>(null);
  const [remanence_T, setRemanence] = useState<number | null>(null);
  const [currents, setCurrents] = useState<string | null>(null);

  const rig = session.value?.apparatus ?? {};
  const own = [...new Set(session.value?.segments.flatMap((s) => (s.current_A === null ? [] : [s.current_A])) ?? [])];
  const usual = (own.length > 1 ? own : USUAL_CURRENTS_A).sort((a, b) => a - b);
  const typed = currents ?? usual.map((a) => entryText(a)).join('; ');
  const currents_A = readList(typed);
  const isCylinder = rig.magnet !== undefined && 'shape' in rig.magnet && rig.magnet.shape === 'cylinder';
  const moment = moment_A_m2 ?? (remanence_T === null ? (found?.moment_A_m2 ?? null) : null);
  const remanence = moment === null && isCylinder ? (remanence_T ?? USUAL_REMANENCE_T) : null;
  const ambient_T = field_T ?? found?.ambient_T ?? USUAL_FIELD_T;
  const rate = recording.value?.facts?.measured_rate_Hz ?? null;
  const plan = planSweep({
    apparatus: rig,
    currents_A: currents_A ?? [],
    ambient_T,
    moment_A_m2: moment ?? undefined,
    remanence_T: remanence ?? undefined,
    ...(rate === null ? {} : { frame_rate_Hz: rate }),
  });

  return (
    <details class="plan" open={(session.value?.segments.length ?? 0) === 0}>
      <summary>Plan a sweep before the bench</summary>
      <div class="rig-part place">
        <NumberField
          caption="Field, guess"
          label="Field, guess"
          unit="µT"
          value={round(ambient_T * 1e6)}
          rule={{ least: 0, aboveLeast: true }}
          onValue={(v) => setField(v === null ? null : v / 1e6)}
        />
        <NumberField
          caption="Moment"
          label="Moment"
          unit="A m²"
          optional
          placeholder={remanence === null ? '' : 'by material'}
          value={moment === null ? null : round(moment)}
          rule={{ least: 0, aboveLeast: true }}
          onValue={setMoment}
        />
        {isCylinder ? (
          <NumberField
            caption="or remanence"
            label="Remanence of the material"
            unit="T"
            optional
            value={remanence}
            rule={{ least: 0, aboveLeast: true, most: 2 }}
            onValue={(v) => {
              setRemanence(v);
              setMoment(null);
            }}
          />
        ) : null}
      </div>
      <div class="stacked plan-currents">
        <span class="quiet">Currents / A, parted by semicolons</span>
        <TextField label="Currents in ampere" class="wide" value={typed} onValue={setCurrents} />
      </div>
      {currents_A === null ? (
        <p class="plan-mistake" role="alert">
          Currents must be numbers in A parted by semicolons, such as 0; 0,1; 0,2.
        </p>
      ) : null}
      {plan.ok ? (
        <PlanTable steps={plan.steps} reversal_A={plan.reversal_A} />
      ) : (
        <p class="quiet">Still needed: {plan.lacks.map((l) => LACKING[l]).join(', ')}.</p>
      )}
    </details>
  );
}

function PlanTable({ steps, reversal_A }: { steps: readonly PlannedStep[]; reversal_A: number }) {
  return (
    <>
      <table class="plain" aria-label="What to expect at each current">
        <thead>
          <tr>
            <th scope="col" class="number">
              current / A
            </th>
            <th scope="col" class="number">
              f₀ / Hz
            </th>
            <th scope="col" class="number">
              ring-down / s
            </th>
            <th scope="col" class="number">
              frames/s
            </th>
          </tr>
        </thead>
        <tbody>
          {steps.map((step) => (
            <tr key={step.current_A}>
              <td class="value">
                {entryText(step.current_A)}
                {step.turned ? ', turned' : ''}
              </td>
              <td class="value">{fixedText(step.f0_Hz, 3)}</td>
              <td class="value">
                {step.shortest_s === null ? 'never enough' : `≥ ${fixedText(Math.ceil(step.shortest_s), 0)}`}
              </td>
              <td class="value">≥ {fixedText(Math.ceil(step.smallest_frame_rate_Hz), 0)}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p class="facts">
        For 0.01 % of f₀ after a nudge of 8°. The coils cancel the field along their axis at {fixedText(reversal_A, 3)}{' '}
        A; beyond it the bar turns round.
      </p>
    </>
  );
}

function round(value: number): number {
  return Number(value.toPrecision(4));
}
