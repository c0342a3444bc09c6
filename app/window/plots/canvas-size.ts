/** Gives a canvas its size in pixels of the screen; one that has it already keeps its memory and what is painted on it. */
export function sized(canvas: HTMLCanvasElement, width: number, height: number): void {
  const [w, h] = [Math.round(width), Math.round(height)];
  if (canvas.width !== w) canvas.width = w;
  if (canvas.height !== h) canvas.height = h;
}
