import { quantityText } from '../numbers/quantity-text.ts';
import { LoweredSymbol } from './lowered-symbol.tsx';

interface QuantityRowProps {
  /** Symbol or short name, e.g. f_0; `_` stands before what is lowered. */
  readonly symbol: string;
  /** What it is, in words. */
  readonly name: string;
  readonly value: number | null | undefined;
  readonly u?: number | null | undefined;
  readonly unit: string;
  readonly factor?: number;
}

/** One row of a table of quantities: name, value, uncertainty, unit, aligned in columns. */
export function QuantityRow({ symbol, name, value, u, unit, factor = 1 }: QuantityRowProps) {
  const text = quantityText(value, u, unit, factor);
  return (
    <tr>
      <th scope="row">
        <span class="symbol">
          <LoweredSymbol of={symbol} />
        </span>{' '}
        <span class="quantity-name">{name}</span>
      </th>
      <td class="value">{text.value}</td>
      <td class="u">{text.u}</td>
      <td class="unit">{text.unit}</td>
    </tr>
  );
}
