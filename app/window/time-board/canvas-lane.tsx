import { useEffect, useRef } from 'preact/hooks';
import { sized } from '../plots/canvas-size.ts';

interface CanvasLaneProps {
  readonly width: number;
  readonly height: number;
  readonly label: string;
  /** Draws the lane in CSS pixels; runs again whenever one of `after` changes. */
  draw(context: CanvasRenderingContext2D, width: number, height: number): void;
  readonly after: readonly unknown[];
}

/** A lane of the time board that is painted: sharp at any scale of the screen. */
export function CanvasLane({ width, height, label, draw, after }: CanvasLaneProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const surface = canvas.current;
    const context = surface?.getContext('2d');
    if (!surface || !context || width <= 0) return;
    const ratio = devicePixelRatio;
    sized(surface, width * ratio, height * ratio);
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    context.clearRect(0, 0, width, height);
    draw(context, width, height);
  }, [width, height, ...after]);
  return <canvas ref={canvas} role="img" aria-label={label} style={{ width: `${width}px`, height: `${height}px` }} />;
}
