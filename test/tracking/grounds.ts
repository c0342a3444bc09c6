/** Grey of a table at a place. */
export type Ground = (x: number, y: number) => number;

/** Squared paper: dark lines every so many pixels. */
export const squaredPaper =
  (pitch_px: number, paper = 230, line = 60): Ground =>
  (x, y) =>
    Math.min(x % pitch_px, y % pitch_px) < 1.5 ? line : paper;

/** A chessboard. */
export const chessboard =
  (pitch_px: number): Ground =>
  (x, y) =>
    (Math.floor(x / pitch_px) + Math.floor(y / pitch_px)) % 2 === 0 ? 40 : 220;

/** Grain like wood's: waves of several lengths and directions, mostly along x. */
export const wood =
  (base: number, depth: number): Ground =>
  (x, y) => {
    let sum = 0;
    for (let k = 1; k <= 8; k++) sum += Math.sin(0.035 * k * x * (k % 3) + (0.09 + 0.13 * k) * y + 1.7 * k * k);
    return base + (depth * sum) / 3;
  };
