import { NumberField } from '../parts/number-field.tsx';
import type { RigField } from './apparatus-fields.ts';

interface RigRowProps {
  readonly field: RigField;
  /** Values and uncertainties by key, in SI units. */
  readonly values: Readonly<Record<string, number | null>>;
  /** Told apart from rows of the same label by this, for screen readers. */
  readonly name?: string;
  readonly entry?: string;
  onValue(key: string, value: number | null): void;
}

/** One number of the rig, with its standard uncertainty beside it unless it is one itself. */
export function RigRow({ field, values, name, entry, onValue }: RigRowProps) {
  const label = name === undefined ? field.label : `${field.label}, ${name}`;
  const u_key = `u_${field.key}`;
  return (
    <div class="rig-row">
      <span class="rig-label">{field.label}</span>
      <NumberField
        label={label}
        unit={field.unit}
        value={scaled(values[field.key], field.factor)}
        optional
        entry={entry ?? field.key}
        rule={field.zero ? { least: 0 } : { least: 0, aboveLeast: true }}
        onValue={(value) => onValue(field.key, value === null ? null : exact(value / field.factor))}
      />
      {field.alone ? null : (
        <>
          <span aria-hidden="true">±</span>
          <NumberField
            label={`Standard uncertainty: ${label}`}
            unit={field.unit}
            value={scaled(values[u_key], field.factor)}
            optional
            placeholder="0"
            entry={`u_${entry ?? field.key}`}
            rule={{ least: 0 }}
            onValue={(value) => onValue(u_key, value === null ? null : exact(value / field.factor))}
          />
        </>
      )}
    </div>
  );
}

function scaled(value: number | null | undefined, factor: number): number | null {
  return value === null || value === undefined ? null : exact(value * factor);
}

/** Without the dust that a change of unit leaves behind. */
function exact(value: number): number {
  return Number(value.toPrecision(12));
}
