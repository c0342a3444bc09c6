import { useEffect, useRef } from 'preact/hooks';
import { sized } from '../plots/canvas-size.ts';
import { viewDraft } from '../state/bar.ts';
import { drawing, panel, pictureSize, zoom, zoomNow } from '../state/picture-tools.ts';
import { playing, shown, wantWidth } from '../state/pictures.ts';
import { frame, recording, view } from '../state/selection.ts';
import { BarOutline } from './bar-outline.tsx';
import { type Drag, dragFrom, type Grip, gripAt } from './drags.ts';
import { LensFrame } from './lens-frame.tsx';
import { ObliqueGuide } from './oblique-guide.tsx';
import { zoomedAbout } from './picture-zoom.ts';
import { RegionFrame } from './region-frame.tsx';
import { SideGuides } from './side-guides.tsx';

const CURSORS: Readonly<Record<string, string>> = {
  nw: 'nwse-resize',
  se: 'nwse-resize',
  ne: 'nesw-resize',
  sw: 'nesw-resize',
  n: 'ns-resize',
  s: 'ns-resize',
  e: 'ew-resize',
  w: 'ew-resize',
};

/** The picture on its panel, with everything that is drawn over it and can be dragged there. */
export function PictureStage() {
  const stage = useRef<HTMLDivElement>(null);
  const canvas = useRef<HTMLCanvasElement>(null);
  const drag = useRef<Drag | null>(null);
  const now = zoomNow();
  const size = panel.value;
  const picture = pictureSize();
  const picked = shown.value;

  useEffect(() => {
    const element = stage.current;
    if (!element) return;
    const observer = new ResizeObserver(() => {
      panel.value = { width: element.clientWidth, height: element.clientHeight };
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  useEffect(() => {
    wantWidth(picture.width * now.scale * devicePixelRatio, Math.min(picture.width, 3840));
  }, [picture.width, now.scale]);

  useEffect(() => {
    const surface = canvas.current;
    const context = surface?.getContext('2d');
    if (!surface || !context) return;
    const ratio = devicePixelRatio;
    sized(surface, size.width * ratio, size.height * ratio);
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    context.clearRect(0, 0, size.width, size.height);
    if (!picked || picked.recording !== recording.value?.id) return;
    context.imageSmoothingEnabled = now.scale < 4;
    // A picture that stands for a thirtieth of a second needn't be as fine as one that stays.
    context.imageSmoothingQuality = playing.value ? 'low' : 'high';
    context.drawImage(picked.bitmap, now.x, now.y, picture.width * now.scale, picture.height * now.scale);
  }, [picked, now.scale, now.x, now.y, size.width, size.height]);

  function place(event: PointerEvent | WheelEvent) {
    const box = stage.current?.getBoundingClientRect();
    return { x: event.clientX - (box?.left ?? 0), y: event.clientY - (box?.top ?? 0) };
  }

  function show(grip: Grip): void {
    if (!stage.current) return;
    stage.current.style.cursor = grip.kind === 'region-handle' ? (CURSORS[grip.handle] ?? 'default') : cursorOf(grip);
  }

  return (
    <div
      ref={stage}
      class="picture-stage"
      onPointerDown={(event) => {
        if (event.button > 1) return;
        drag.current = dragFrom(gripAt(place(event), event.button === 1), place(event));
        if (drag.current) event.currentTarget.setPointerCapture(event.pointerId);
      }}
      onPointerMove={(event) => {
        if (drag.current) drag.current.to(place(event));
        else show(gripAt(place(event), false));
      }}
      onPointerUp={(event) => {
        drag.current?.end(place(event));
        drag.current = null;
      }}
      onPointerCancel={() => {
        drag.current?.giveUp();
        drag.current = null;
      }}
      onWheel={(event) => {
        event.preventDefault();
        zoom.value = zoomedAbout(zoomNow(), place(event), 1.0015 ** -event.deltaY, picture, size);
      }}
      data-drawing={drawing.value ?? undefined}
    >
      <canvas
        ref={canvas}
        role="img"
        aria-label={picked ? `Frame ${picked.index} at ${picked.time_s.toFixed(3)} s` : 'No frame yet'}
      />
      <Reading />
      {/* biome-ignore lint/a11y/useSemanticElements: SVG has no fieldset. */}
      <svg class="overlay" role="group" aria-label="Drawn over the picture" width={size.width} height={size.height}>
        <RegionFrame view={viewDraft.value ?? view.value} />
        <SideGuides view={viewDraft.value ?? view.value} />
        <ObliqueGuide view={viewDraft.value ?? view.value} />
        <BarOutline />
        <LensFrame />
      </svg>
    </div>
  );
}

/** Says which frame is being read, where it keeps us waiting. */
function Reading() {
  const at = frame.value;
  if (playing.value || at === null || shown.value?.index === at) return null;
  return <p class="reading">reading frame {at} …</p>;
}

function cursorOf(grip: Grip): string {
  switch (grip.kind) {
    case 'draw':
      return 'crosshair';
    case 'region':
    case 'lens':
      return 'move';
    case 'lens-corner':
      return 'nwse-resize';
    case 'axis':
    case 'facing':
    case 'half-length':
      return 'ew-resize';
    case 'elevation':
      return 'ns-resize';
    case 'picture':
      return zoom.value ? 'grab' : 'default';
    default:
      return 'default';
  }
}
