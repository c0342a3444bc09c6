import { useEffect, useState } from 'preact/hooks';
import { edit } from '../state/document.ts';
import { partOf, type RigField, valuesOf, withPart } from './apparatus-fields.ts';
import { RigRow } from './rig-row.tsx';

interface RigPartProps {
  readonly name: 'coil' | 'magnet' | 'meter';
  /** What the session holds of it. */
  readonly part: object | undefined;
  readonly kind: string;
  readonly fields: readonly RigField[];
  readonly fixed?: Readonly<Record<string, string>>;
}

const TITLES = { coil: 'Coils', magnet: 'Magnet', meter: 'Current meter' };

/** Numbers of one part of the rig with their uncertainties. They enter the session once all that are needed are there. */
export function RigPart({ name, part, kind, fields, fixed = {} }: RigPartProps) {
  const [values, setValues] = useState(() => valuesOf(part));
  useEffect(() => setValues((before) => (part ? { ...keptUncertainties(before), ...valuesOf(part) } : before)), [part]);

  function set(key: string, value: number | null): void {
    const next = { ...values, [key]: value };
    setValues(next);
    const whole = partOf(fields, next, fixed);
    const none = whole !== null && Object.keys(whole).length === 0;
    if (whole) edit(TITLES[name], (s) => withPart(s, name, none ? undefined : whole), `${name} ${key}`);
  }

  const missing = fields.filter((f) => !f.optional && values[f.key] == null);
  return (
    <div class="rig-part">
      {fields.map((field) => (
        <RigRow key={`${kind} ${field.key}`} field={field} values={values} onValue={set} />
      ))}
      {part === undefined && missing.length > 0 && fields.length > 0 ? (
        <p class="state-line">Still needed: {missing.map((f) => f.label.toLowerCase()).join(', ')}.</p>
      ) : null}
    </div>
  );
}

function keptUncertainties(before: Record<string, number | null>): Record<string, number | null> {
  return Object.fromEntries(Object.entries(before).filter(([key, value]) => key.startsWith('u_') && value !== null));
}
