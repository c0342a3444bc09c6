/** An input of a budget: a named quantity with its standard uncertainty. */
export interface BudgetInput {
  readonly name: string;
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  readonly dof: number;
}

/** A quantity worked out from inputs, with what each of them contributes to its uncertainty. */
export interface Derived {
  readonly value: number;
  readonly u: number;
  readonly rows: readonly DerivedRow[];
  /** The quantity at other values of the inputs, in the order of `rows`. */
  of(values: readonly number[]): number;
}

/** One input's part in a derived quantity. */
export interface DerivedRow extends BudgetInput {
  /** Change of the result per change of the input. */
  readonly sensitivity: number;
}

/**
 * Works out `of` at the inputs' values and its sensitivities to each by central differences (step: one part in 10⁵ of the
 * value, JCGM 100:2008, 5.1.3, note 2 allows numerical ones). Inputs are taken as independent.
 */
export function derive(inputs: readonly BudgetInput[], of: (values: readonly number[]) => number): Derived {
  const values = inputs.map((input) => input.value);
  const rows = inputs.map((input, i) => {
    const step = 1e-5 * (Math.abs(input.value) || 1);
    const at = (shift: number) => of(values.map((value, k) => (k === i ? value + shift : value)));
    return { ...input, sensitivity: (at(step) - at(-step)) / (2 * step) };
  });
  const u = Math.sqrt(rows.reduce((sum, row) => sum + (row.sensitivity * row.u) ** 2, 0));
  return { value: of(values), u, rows, of };
}
