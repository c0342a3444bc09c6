import { SHEETS } from '../contract.ts';
import { ApparatusSheet } from './apparatus-sheet/apparatus-sheet.tsx';
import { FieldSheet } from './field-sheet/field-sheet.tsx';
import { SegmentSheet } from './segment-sheet/segment-sheet.tsx';
import { type Sheet, sheet } from './state/selection.ts';
import { ViewSheet } from './view-sheet/view-sheet.tsx';

const NAMES: Readonly<Record<Sheet, string>> = {
  view: 'View',
  segment: 'Segment',
  field: 'Field',
  apparatus: 'Apparatus',
};

/** The sheets at the right, one open at a time. */
export function Sheets() {
  const open = sheet.value;
  return (
    <section class="sheets" aria-label="Sheets">
      <div class="sheet-tabs" role="tablist" aria-label="Sheets" onKeyDown={turn}>
        {SHEETS.map((name, i) => (
          <button
            key={name}
            type="button"
            role="tab"
            id={`tab-${name}`}
            aria-selected={open === name}
            aria-controls="sheet"
            tabIndex={open === name ? 0 : -1}
            title={`${NAMES[name]} sheet (${i + 1})`}
            onClick={() => {
              sheet.value = name;
            }}
          >
            {NAMES[name]}
          </button>
        ))}
      </div>
      <div key={open} class="sheet" id="sheet" role="tabpanel" aria-labelledby={`tab-${open}`}>
        <OpenSheet name={open} />
      </div>
    </section>
  );
}

function OpenSheet({ name }: { name: Sheet }) {
  switch (name) {
    case 'view':
      return <ViewSheet />;
    case 'segment':
      return <SegmentSheet />;
    case 'field':
      return <FieldSheet />;
    case 'apparatus':
      return <ApparatusSheet />;
    default:
      return name satisfies never;
  }
}

function turn(event: KeyboardEvent): void {
  const way = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
  if (way === 0) return;
  event.preventDefault();
  event.stopPropagation();
  const next = SHEETS[(SHEETS.indexOf(sheet.value) + way + SHEETS.length) % SHEETS.length] ?? 'view';
  sheet.value = next;
  requestAnimationFrame(() => document.getElementById(`tab-${next}`)?.focus());
}
