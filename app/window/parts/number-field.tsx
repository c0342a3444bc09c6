import { useEffect, useId, useRef, useState } from 'preact/hooks';
import { type EntryRule, readDecimal } from '../numbers/decimal-entry.ts';
import { entryText } from '../numbers/quantity-text.ts';

interface NumberFieldProps {
  /** What a screen reader says and the sentence about a mistake begins with. */
  readonly label: string;
  /** Shown before the field; left out: nothing is. */
  readonly caption?: string | undefined;
  readonly unit: string;
  readonly value: number | null;
  readonly rule?: Omit<EntryRule, 'name' | 'unit'>;
  /** An empty field is allowed and gives null. */
  readonly optional?: boolean;
  readonly entry?: string;
  readonly placeholder?: string;
  readonly disabled?: boolean;
  readonly class?: string;
  onValue(value: number | null): void;
  /** Enter was pressed and the value taken. */
  onEnter?(): void;
}

const SETTLE_MS = 700;

/** A field for a number: comma or point, unit beside it, one sentence below it where what was typed can't be used. */
export function NumberField(props: NumberFieldProps) {
  const { label, unit, value, optional = false } = props;
  const [typed, setTyped] = useState<string | null>(null);
  const [mistake, setMistake] = useState<string | null>(null);
  const settling = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  const id = useId();

  useEffect(() => () => clearTimeout(settling.current), []);

  /** Takes what was typed; `quietly`: an unfinished number is no mistake yet. */
  function take(text: string, quietly: boolean): boolean {
    clearTimeout(settling.current);
    const read = readDecimal(text, { name: label, unit, ...props.rule });
    if (read.kind === 'mistake' || (read.kind === 'empty' && !optional)) {
      if (!quietly) setMistake(read.kind === 'mistake' ? read.message : `${label} is needed.`);
      return false;
    }
    setMistake(null);
    const next = read.kind === 'number' ? read.value : null;
    if (next !== value) props.onValue(next);
    return true;
  }

  return (
    <span class={`number-field ${props.class ?? ''}`}>
      {props.caption === undefined ? null : <label for={id}>{props.caption}</label>}
      <span class="number-box" data-wrong={mistake !== null || undefined}>
        <input
          id={id}
          type="text"
          inputMode="decimal"
          autocomplete="off"
          spellcheck={false}
          aria-label={unit === '' ? label : `${label}, ${spoken(unit)}`}
          aria-invalid={mistake !== null}
          aria-describedby={mistake === null ? undefined : `${id}-mistake`}
          data-entry={props.entry}
          placeholder={props.placeholder}
          disabled={props.disabled}
          value={typed ?? entryText(value)}
          onInput={(event) => {
            const text = event.currentTarget.value;
            setTyped(text);
            setMistake(null);
            clearTimeout(settling.current);
            settling.current = setTimeout(() => take(text, true), SETTLE_MS);
          }}
          onBlur={() => {
            if (typed !== null && take(typed, false)) setTyped(null);
          }}
          onKeyDown={(event) => {
            if (event.key === 'Enter') {
              event.preventDefault();
              if (typed !== null && !take(typed, false)) return;
              setTyped(null);
              props.onEnter?.();
            } else if (event.key === 'Escape' && typed !== null) {
              event.stopPropagation();
              clearTimeout(settling.current);
              setTyped(null);
              setMistake(null);
            }
          }}
        />
        {unit === '' ? null : (
          <span class="unit" aria-hidden="true">
            {unit}
          </span>
        )}
      </span>
      {mistake === null ? null : (
        <span class="mistake" id={`${id}-mistake`} role="alert">
          {mistake}
        </span>
      )}
    </span>
  );
}

const SPOKEN: Readonly<Record<string, string>> = {
  A: 'ampere',
  s: 'seconds',
  '°': 'degrees',
  px: 'pixels',
  mm: 'millimetres',
  g: 'grams',
  m: 'metres',
};

function spoken(unit: string): string {
  return SPOKEN[unit] ?? unit;
}
