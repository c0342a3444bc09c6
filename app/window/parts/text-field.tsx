import { useEffect, useRef, useState } from 'preact/hooks';

interface TextFieldProps {
  readonly label: string;
  readonly value: string;
  readonly placeholder?: string;
  readonly entry?: string;
  readonly class?: string;
  onValue(value: string): void;
}

const SETTLE_MS = 700;

/** A field for one line of text; taken when typing rests, on Enter and when the field is left. */
export function TextField({ label, value, placeholder, entry, onValue, ...rest }: TextFieldProps) {
  const [typed, setTyped] = useState<string | null>(null);
  const settling = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  useEffect(() => () => clearTimeout(settling.current), []);

  function take(text: string): void {
    clearTimeout(settling.current);
    if (text !== value) onValue(text);
  }

  return (
    <input
      class={`text-field ${rest.class ?? ''}`}
      type="text"
      aria-label={label}
      data-entry={entry}
      placeholder={placeholder}
      autocomplete="off"
      spellcheck={false}
      value={typed ?? value}
      onInput={(event) => {
        const text = event.currentTarget.value;
        setTyped(text);
        clearTimeout(settling.current);
        settling.current = setTimeout(() => take(text), SETTLE_MS);
      }}
      onBlur={() => {
        if (typed !== null) take(typed);
        setTyped(null);
      }}
      onKeyDown={(event) => {
        if (event.key === 'Enter' && typed !== null) take(typed);
        if (event.key === 'Escape' && typed !== null) {
          event.stopPropagation();
          clearTimeout(settling.current);
          setTyped(null);
        }
      }}
    />
  );
}
