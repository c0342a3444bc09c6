/** What an entry field holds after it has been read: a number, nothing, or a sentence that says what was expected. */
export type Entry =
  | { readonly kind: 'number'; readonly value: number }
  | { readonly kind: 'empty' }
  | { readonly kind: 'mistake'; readonly message: string };

/** What an entry accepts, and how its field and unit are called in the sentence about a mistake. */
export interface EntryRule {
  /** Name of the field as the user sees it, e.g. `Current`. */
  readonly name: string;
  /** Unit as shown beside the field, e.g. `A`; a unit typed after the number is accepted. */
  readonly unit: string;
  readonly least?: number;
  readonly most?: number;
  /** The least value itself is not allowed. */
  readonly aboveLeast?: boolean;
}

const MINUS_SIGNS = /[\u2212\u2010\u2011\u2012\u2013\u2014\uFE63\uFF0D]/g;
const SPACES = /[\s\u00A0\u202F\u2009']/g;
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/**
 * Reads a number as people type it: decimal point or comma, any kind of minus sign, spaces between thousands, the unit
 * after it. A text with both comma and point is refused unless only one of them can be the decimal sign.
 * @returns the number in the unit of the rule, `empty`, or one sentence naming the field and what was expected.
 */
export function readDecimal(typed: string, rule: EntryRule): Entry {
  let text = typed.replace(MINUS_SIGNS, '-').replace(SPACES, '');
  if (rule.unit !== '' && text.endsWith(rule.unit.replace(SPACES, ''))) {
    text = text.slice(0, text.length - rule.unit.replace(SPACES, '').length);
  }
  if (text === '') return { kind: 'empty' };
  const plain = withPoint(text);
  if (plain === null || !NUMBER.test(plain)) {
    return { kind: 'mistake', message: `${rule.name} must be a number${inUnit(rule)}, such as 0.25 or 0,25.` };
  }
  const value = Number(plain);
  if (!Number.isFinite(value)) return { kind: 'mistake', message: `${rule.name} is too large to be a number.` };
  const { least, most } = rule;
  if (least !== undefined && (rule.aboveLeast ? value <= least : value < least)) {
    const bound = rule.aboveLeast ? `above ${least}` : `${least} or more`;
    return { kind: 'mistake', message: `${rule.name} must be ${bound}${withUnit(rule)}.` };
  }
  if (most !== undefined && value > most) {
    return { kind: 'mistake', message: `${rule.name} must be ${most}${withUnit(rule)} at most.` };
  }
  return { kind: 'number', value: value === 0 ? 0 : value };
}

/** The text with a decimal point; null where comma and point can't both be understood. */
function withPoint(text: string): string | null {
  const commas = text.split(',').length - 1;
  const points = text.split('.').length - 1;
  if (commas === 0) return points <= 1 ? text : null;
  if (points === 0) return commas === 1 ? text.replace(',', '.') : null;
  // 1.234,5 or 1,234.5: the sign that comes last and stands once is the decimal sign, the other parts off thousands.
  const decimal = text.lastIndexOf(',') > text.lastIndexOf('.') ? ',' : '.';
  const other = decimal === ',' ? '.' : ',';
  if ((decimal === ',' ? commas : points) !== 1) return null;
  const whole = text.slice(0, text.indexOf(decimal)).replace(/^[+-]/, '').split(other);
  if (!whole.every((part, i) => (i === 0 ? /^\d{1,3}$/ : /^\d{3}$/).test(part))) return null;
  return text.split(other).join('').replace(decimal, '.');
}

function inUnit(rule: EntryRule): string {
  return rule.unit === '' ? '' : ` in ${rule.unit}`;
}

function withUnit(rule: EntryRule): string {
  return rule.unit === '' ? '' : ` ${rule.unit}`;
}
