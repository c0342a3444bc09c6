import { useEffect, useState } from 'preact/hooks';
import type { Result } from '../contract.ts';
import { documentState } from './state/document.ts';
import { chooseAndOpen, openDemo, openRecent } from './state/files.ts';
import { ask, hello } from './state/host.ts';

const STEPS = [
  ['Open the recording', 'of the bench: any video that a phone writes.'],
  ['Draw the region', 'around the reach of the bar, and say how the camera looks.'],
  ['Follow the bar', 'and see its angle over the whole recording.'],
  ['Mark a segment', 'wherever the bar was left alone, and type its current.'],
  ['Read and export', 'frequencies, field and moment with their uncertainties.'],
] as const;

/** A bar on its fibre, and how it rings down: f(t) = exp(-t / 2.6) cos(2π t) over eight swings. */
function RingDownDrawing() {
  const points = Array.from({ length: 321 }, (_, i) => {
    const t = i / 40;
    return `${(150 + (i / 320) * 440).toFixed(1)} ${(52 - 38 * Math.exp(-t / 2.6) * Math.cos(2 * Math.PI * t)).toFixed(1)}`;
  });
  return (
    <svg class="empty-drawing" viewBox="0 0 600 104" aria-hidden="true">
      <line x1="62" x2="62" y1="4" y2="52" />
      <g transform="rotate(-14 62 52)">
        <rect class="south" x="14" y="46.500" width="48" height="11" rx="1.500" />
        <rect class="north" x="62" y="46.500" width="48" height="11" rx="1.500" />
      </g>
      <line class="axis" x1="150" x2="592" y1="52" y2="52" />
      <path class="curve" d={`M${points.join('L')}`} />
    </svg>
  );
}

/** Nothing is open: what to do, the demo session, sessions used before, and the cautions. */
export function EmptyState() {
  const [recent, setRecent] = useState<Result<'recentSessions'>>([]);
  const cautions = hello.value?.cautions ?? [];
  const asked = documentState.value !== null;
  useEffect(() => {
    if (!asked) return;
    void ask('recentSessions', {}).then((found) => setRecent(found ?? []));
  }, [asked]);
  return (
    <main class="empty-state">
      <div class="empty-page">
        <RingDownDrawing />
        <h1>Time a magnet on a fibre from a phone recording</h1>
        <p class="lead">Drop a recording or a session file here, or</p>
        <div class="empty-buttons">
          <button type="button" class="primary large" onClick={() => void chooseAndOpen()}>
            Open a recording or session…
          </button>
          <button type="button" class="large" onClick={() => void openDemo()}>
            Open the demo session
          </button>
        </div>
        <ol class="steps">
          {STEPS.map(([what, how]) => (
            <li key={what}>
              <b>{what}</b> <span>{how}</span>
            </li>
          ))}
        </ol>
        {recent.length > 0 ? (
          <section>
            <h2>Used before</h2>
            <ul class="recent">
              {recent.map((one) => (
                <li key={one.id}>
                  <button type="button" onClick={() => void openRecent(one.id)}>
                    <b>{one.title || one.name}</b>
                    <span class="quiet">
                      {one.name}, {one.opened.slice(0, 10)}
                    </span>
                  </button>
                </li>
              ))}
            </ul>
          </section>
        ) : null}
        {cautions.length > 0 ? (
          <section class="cautions">
            <h2>Cautions</h2>
            <ul>
              {cautions.map((text) => (
                <li key={text}>{text}</li>
              ))}
            </ul>
          </section>
        ) : null}
      </div>
    </main>
  );
}
