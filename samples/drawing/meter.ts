import type { Paint } from './board.ts';

/** Outer size of the current meter's case and where its display lies on the top face, metres from the middle. */
export const METER = {
  width_m: 0.086,
  depth_m: 0.054,
  height_m: 0.02,
  displayWidth_m: 0.07,
  displayDepth_m: 0.024,
  displayY_m: 0.0085,
} as const;

// Segments lit for each digit, in the order top, upper right, lower right, bottom, lower left, upper left, middle (common practice).
const LIT: Readonly<Record<string, string>> = {
  '0': '1111110',
  '1': '0110000',
  '2': '1101101',
  '3': '1111001',
  '4': '0110011',
  '5': '1011011',
  '6': '1011111',
  '7': '1110000',
  '8': '1111111',
  '9': '1111011',
  '-': '0000001',
  ' ': '0000000',
};
// Each segment as a stroke in a cell 1 wide and 2 high.
const STROKES = [
  [0.12, 2, 0.88, 2],
  [1, 1.88, 1, 1.12],
  [1, 0.88, 1, 0.12],
  [0.12, 0, 0.88, 0],
  [0, 0.88, 0, 0.12],
  [0, 1.88, 0, 1.12],
  [0.12, 1, 0.88, 1],
] as const;

function strokeDistance(x: number, y: number, stroke: readonly [number, number, number, number]): number {
  const [x0, y0, x1, y1] = stroke;
  const dx = x1 - x0;
  const dy = y1 - y0;
  const along = Math.min(1, Math.max(0, ((x - x0) * dx + (y - y0) * dy) / (dx * dx + dy * dy)));
  return Math.hypot(x - x0 - along * dx, y - y0 - along * dy);
}

/** What the meter shows: sign, one digit, point, three digits. */
export function reading(current_A: number): string {
  const rounded = Math.abs(current_A).toFixed(3);
  return `${current_A < 0 && Number(rounded) !== 0 ? '-' : ' '}${rounded}`;
}

function litAt(text: string, x_m: number, y_m: number): boolean {
  const height = 0.014;
  const pitch = 0.0112;
  const slant = 0.1;
  const cellY = ((y_m + height / 2) / height) * 2;
  let column = 0;
  for (const letter of text) {
    if (letter === '.') continue;
    const left = -0.0305 + column * pitch;
    const cellX = (x_m - slant * y_m - left) / (height / 2) / 0.95;
    column++;
    if (cellX < -0.2 || cellX > 1.35 || cellY < -0.2 || cellY > 2.2) continue;
    const lit = LIT[letter] ?? LIT[' ']!;
    for (let i = 0; i < 7; i++) {
      if (lit[i] === '1' && strokeDistance(cellX, cellY, STROKES[i]!) < 0.13) return true;
    }
    // The point stands after the digit before it.
    if (column === 2 && Math.hypot(cellX - 1.3, cellY) < 0.15) return true;
  }
  return false;
}

function unitAt(x_m: number, y_m: number): boolean {
  const x = (x_m - 0.0275) / 0.0022;
  const y = (y_m + 0.0035) / 0.0022;
  if (y < 0 || y > 3 || x < -1.2 || x > 1.2) return false;
  return Math.abs(Math.abs(x) - (1 - y / 3)) < 0.2 || (Math.abs(y - 1) < 0.2 && Math.abs(x) < 0.7);
}

/** Paints the top face of the meter showing a reading; light of its own is written as reflectance above what the lamp gives. */
export function meterPaint(text: string): Paint {
  return (x, y, out) => {
    const inX = Math.abs(x);
    const displayY = y - METER.displayY_m;
    const edge = Math.max(inX - METER.displayWidth_m / 2, Math.abs(displayY) - METER.displayDepth_m / 2);
    out[0] = 0.055;
    out[1] = 0.062;
    out[2] = 0.07;
    if (edge < -0.0014) {
      const lit = litAt(text, x + 0.0015, displayY) || unitAt(x, displayY);
      const glow = 1 - 0.12 * (displayY / 0.012);
      out[0] = lit ? 0.045 : 0.5 * glow;
      out[1] = lit ? 0.06 : 0.62 * glow;
      out[2] = lit ? 0.04 : 0.33 * glow;
    } else if (edge < 0) {
      out[0] = out[1] = out[2] = 0.012;
    } else if (Math.hypot(inX - 0.024, y + 0.0155) < 0.0048) {
      const red = x > 0;
      out[0] = red ? 0.42 : 0.02;
      out[1] = 0.02;
      out[2] = 0.02;
      if (Math.hypot(inX - 0.024, y + 0.0155) < 0.002) out[0] = out[1] = out[2] = 0.008;
    } else if (Math.hypot(x, y + 0.0155) < 0.0062) {
      const pointer = Math.abs(x * 0.8 + (y + 0.0155) * 0.6) < 0.0006 && y > -0.0155;
      const shade = pointer ? 0.6 : 0.13;
      out[0] = out[1] = out[2] = shade;
    } else if (Math.max(inX - 0.0418, Math.abs(y) - 0.0258) > -0.0007) {
      out[0] = out[1] = out[2] = 0.1;
    }
  };
}
