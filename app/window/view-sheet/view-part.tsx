import type { SessionView } from '../../contract.ts';
import { fixedText } from '../numbers/quantity-text.ts';
import { NumberField } from '../parts/number-field.tsx';
import { replaceView, type ViewKind, viewOfKind } from '../session-edits/view-edits.ts';
import { bar, looking } from '../state/bar.ts';
import { edit } from '../state/document.ts';
import { frame } from '../state/selection.ts';
import { KindSketch } from './kind-sketch.tsx';

const KINDS: readonly (readonly [ViewKind, string])[] = [
  ['plan', 'along the fibre'],
  ['oblique', 'from above, at an angle'],
  ['side', 'from bench level'],
];

/** How the camera looks, with the sketch that explains it, the region in numbers, and whether the bar is found. */
export function ViewPart({ of: v }: { of: SessionView }) {
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
          onDrag={(deg) => {
            if (v.kind === 'oblique') change('Elevation', { ...v, elevation_deg: deg }, 'elevation');
            else if (v.kind === 'side') change('Facing', { ...v, facing_deg: deg }, 'facing');
          }}
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
      <p class="quiet">
        Or drag the oval on the picture until it looks as a level circle does there, such as a round card below the bar.
      </p>
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
      <p class="quiet">All three can be dragged on the picture as well.</p>
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
    <fieldset class="region-fields" aria-label="Region">
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
    </fieldset>
  );
}

/** Whether the bar is found in the frame at the cursor. */
function BarState({ of: v }: { of: SessionView }) {
  const last = bar.value;
  const isCurrent = last?.view === v.id && last.frame === frame.value && !looking.value;
  const current = isCurrent ? last.found : null;
  return (
    <p class="bar-state" role="status" data-found={current?.found ?? undefined}>
      {current === null
        ? 'Looking for the bar …'
        : current.found
          ? `Bar found at ${fixedText(current.angle, 1)}${current.unit === 'deg' ? '°' : ' px'}, quality ${fixedText(current.quality, 2)}.`
          : current.message}
    </p>
  );
}
