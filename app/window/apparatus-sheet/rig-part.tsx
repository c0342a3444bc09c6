import { useEffect, useState } from 'preact/hooks';
import { NumberField } from '../parts/number-field.tsx';
import { edit } from '../state/document.ts';
import { partOf, type RigField, valuesOf, withPart } from './apparatus-fields.ts';

interface RigPartProps {
  readonly name: 'coil' | 'magnet' | 'fibre';
  /** What the session holds of it. */
  readonly part: object | undefined;
  readonly kind: string;
  readonly fields: readonly RigField[];
  readonly fixed?: Readonly<Record<string, string>>;
}

const TITLES = { coil: 'Coils', magnet: 'Magnet', fibre: 'Fibre' };

/** Numbers of one part of the rig with their uncertainties. They enter the session once all that are needed are there. */
export function RigPart({ name, part, kind, fields, fixed = {} }: RigPartProps) {
  const [values, setValues] = useState(() => valuesOf(part));
  useEffect(() => setValues((before) => (part ? { ...keptUncertainties(before), ...valuesOf(part) } : before)), [part]);

  function set(key: string, value: number | null): void {
    const next = { ...values, [key]: value };
    setValues(next);
    const whole = partOf(fields, next, fixed);
    if (name === 'fibre' && next[FIBRE_KEY] == null) edit('Fibre', (s) => withPart(s, 'fibre', undefined), 'fibre');
    else if (whole) edit(TITLES[name], (s) => withPart(s, name, whole), `${name} ${key}`);
  }

  const missing = fields.filter((f) => !f.optional && values[f.key] == null);
  return (
    <div class="rig-part">
      {fields.map((field) => (
        <div key={`${kind} ${field.key}`} class="rig-row">
          <span class="rig-label">{field.label}</span>
          <NumberField
            label={field.label}
            unit={field.unit}
            value={scaled(values[field.key], field.factor)}
            optional
            entry={field.key}
            rule={field.zero ? { least: 0 } : { least: 0, aboveLeast: true }}
            onValue={(value) => set(field.key, value === null ? null : exact(value / field.factor))}
          />
          <span aria-hidden="true">±</span>
          <NumberField
            label={`Standard uncertainty: ${field.label}`}
            unit={field.unit}
            value={scaled(values[`u_${field.key}`], field.factor)}
            optional
            placeholder="0"
            entry={`u_${field.key}`}
            rule={{ least: 0 }}
            onValue={(value) => set(`u_${field.key}`, value === null ? null : exact(value / field.factor))}
          />
        </div>
      ))}
      {part === undefined && missing.length > 0 && fields.length > 0 ? (
        <p class="state-line">Still needed: {missing.map((f) => f.label.toLowerCase()).join(', ')}.</p>
      ) : null}
    </div>
  );
}

const FIBRE_KEY = 'stiffness_N_m_per_rad';

function keptUncertainties(before: Record<string, number | null>): Record<string, number | null> {
  return Object.fromEntries(Object.entries(before).filter(([key, value]) => key.startsWith('u_') && value !== null));
}

function scaled(value: number | null | undefined, factor: number): number | null {
  return value === null || value === undefined ? null : exact(value * factor);
}

/** Without the dust that a change of unit leaves behind. */
function exact(value: number): number {
  return Number(value.toPrecision(12));
}
