import { useEffect, useState } from 'preact/hooks';
import { edit, session } from '../state/document.ts';
import {
  COIL_FIELDS,
  type CoilKind,
  coilKind,
  MAGNET_FIELDS,
  type MagnetKind,
  METER_FIELDS,
  magnetKind,
  withPart,
} from './apparatus-fields.ts';
import { Choice } from './choice.tsx';
import { FibrePart } from './fibre-part.tsx';
import { PlacePart } from './place-part.tsx';
import { PlanPart } from './plan-part.tsx';
import { RigPart } from './rig-part.tsx';

const COILS: readonly (readonly [CoilKind, string])[] = [
  ['none', 'not described'],
  ['dimensions', 'by dimensions'],
  ['constant', 'by measured constant'],
];
const MAGNETS: readonly (readonly [MagnetKind, string])[] = [
  ['none', 'not described'],
  ['cylinder', 'cylinder'],
  ['bar', 'rectangular bar'],
  ['inertia', 'by moment of inertia'],
];

/** The rig: coils, magnet, fibre, current meter, place. Every number has its standard uncertainty beside it. */
export function ApparatusSheet() {
  const rig = session.value?.apparatus;
  const [coil, chooseCoil] = useKind<CoilKind>(coilKind(rig?.coil));
  const [magnet, chooseMagnet] = useKind<MagnetKind>(magnetKind(rig?.magnet));
  return (
    <div class="apparatus-sheet">
      <p class="quiet">
        With the coils the reduction gives the field, with the magnet its moment and inertia as well. Behind ± stands
        the standard uncertainty.
      </p>
      <section>
        <header class="sheet-head">
          <h2>Coils</h2>
          <Choice
            label="How the coils are described"
            options={COILS}
            value={coil}
            onChange={(kind) => {
              chooseCoil(kind);
              if (kind === 'none') edit('Coils', (s) => withPart(s, 'coil', undefined));
            }}
          />
        </header>
        <RigPart
          key={coil}
          name="coil"
          kind={coil}
          fields={COIL_FIELDS[coil]}
          part={coilKind(rig?.coil) === coil ? rig?.coil : undefined}
        />
      </section>
      <section>
        <header class="sheet-head">
          <h2>Magnet</h2>
          <Choice
            label="How the magnet is described"
            options={MAGNETS}
            value={magnet}
            onChange={(kind) => {
              chooseMagnet(kind);
              if (kind === 'none') edit('Magnet', (s) => withPart(s, 'magnet', undefined));
            }}
          />
        </header>
        <RigPart
          key={magnet}
          name="magnet"
          kind={magnet}
          fields={MAGNET_FIELDS[magnet]}
          fixed={magnet === 'cylinder' || magnet === 'bar' ? { shape: magnet } : {}}
          part={magnetKind(rig?.magnet) === magnet ? rig?.magnet : undefined}
        />
      </section>
      <section>
        <header class="sheet-head">
          <h2>Fibre</h2>
        </header>
        <p class="quiet">
          The sweep alone tells fibre and field apart only where currents are reversed far enough to turn the bar round.
          Else one of these does.
        </p>
        <FibrePart fibre={rig?.fibre} />
      </section>
      <section>
        <header class="sheet-head">
          <h2>Current meter</h2>
        </header>
        <p class="quiet">What all steps have in common; what each step adds is typed with its current.</p>
        <RigPart name="meter" kind="meter" fields={METER_FIELDS} part={rig?.meter} />
      </section>
      <section>
        <header class="sheet-head">
          <h2>Place and day</h2>
        </header>
        <PlacePart place={session.value?.place} />
      </section>
      <PlanPart />
    </div>
  );
}

/** The kind chosen in the form: what the session holds, or what the user has begun to describe. */
function useKind<K extends string>(held: K): readonly [K, (kind: K) => void] {
  const [chosen, choose] = useState<K>(held);
  useEffect(() => {
    if (held !== 'none') choose(held);
  }, [held]);
  return [chosen, choose];
}
