/** One of a few ways, from a list; its label is for screen readers. */
export function Choice<K extends string>(props: {
  label: string;
  options: readonly (readonly [K, string])[];
  value: K;
  onChange(kind: K): void;
}) {
  return (
    <select
      aria-label={props.label}
      value={props.value}
      onChange={(event) => props.onChange(event.currentTarget.value as K)}
    >
      {props.options.map(([kind, words]) => (
        <option key={kind} value={kind}>
          {words}
        </option>
      ))}
    </select>
  );
}
