import type { SessionSegment } from '../../contract.ts';
import { fixedText } from '../numbers/quantity-text.ts';
import { CheckList } from '../parts/check-list.tsx';
import { Icon } from '../parts/icons.tsx';
import { StandingMark } from '../parts/standing-mark.tsx';
import { run } from '../state/command-table.ts';
import { lensOpen } from '../state/picture-tools.ts';
import { curves, preview, problemOf, resultOf, resultsState, standingOf, waitingFor } from '../state/results.ts';
import { segment, segments, view } from '../state/selection.ts';
import { FitChart, SpectrumChart } from './fit-charts.tsx';
import { LensView } from './lens-view.tsx';
import { SegmentEntry } from './segment-entry.tsx';
import { NumbersTable, numbersOfPreview, numbersOfResult } from './segment-numbers.tsx';

/** Everything about the selected segment: what the user says of it, and what was measured. */
export function SegmentSheet() {
  const s = segment.value;
  if (!s) return <NoSegment />;
  return (
    <div class="segment-sheet">
      <Heading of={s} />
      <SegmentEntry of={s} />
      {lensOpen.value ? <LensView of={s} /> : null}
      <Measured of={s} />
    </div>
  );
}

function NoSegment() {
  return (
    <div class="sheet-empty">
      <h2>{segments.value.length === 0 ? 'No segment yet' : 'No segment selected'}</h2>
      {segments.value.length === 0 ? (
        <p>
          A segment is a stretch of recording at one current in which the bar is left alone.{' '}
          {view.value
            ? 'Drag over it on the time board, or go to its start, press B, go to its end, press E.'
            : 'Draw the region around the bar first (View sheet).'}
        </p>
      ) : (
        <p>Click one on the time board, or press Page Down.</p>
      )}
    </div>
  );
}

function Heading({ of: s }: { of: SessionSegment }) {
  const place = segments.value.findIndex((one) => one.id === s.id);
  const standing = standingOf(s);
  return (
    <header class="sheet-head">
      <h2>Segment {s.id}</h2>
      <StandingMark standing={standing} named />
      <span class="spacer" />
      <span class="quiet">
        {place + 1} of {segments.value.length}
      </span>
      <button
        type="button"
        class="small"
        disabled={place <= 0}
        title="Previous segment (Page Up)"
        aria-label="Previous segment"
        onClick={() => run('segment-previous')}
      >
        <Icon name="left" />
      </button>
      <button
        type="button"
        class="small"
        disabled={place >= segments.value.length - 1}
        title="Next segment (Page Down)"
        aria-label="Next segment"
        onClick={() => run('segment-next')}
      >
        <Icon name="right" />
      </button>
    </header>
  );
}

function Measured({ of: s }: { of: SessionSegment }) {
  const result = resultOf.value.get(s.id);
  const waiting = waitingFor.value.has(s.id);
  const quick = preview.value;
  const fits =
    quick &&
    quick.segment === s.id &&
    (waiting || !result || quick.start_s !== result.start_s || quick.end_s !== result.end_s);
  if (quick && fits) {
    const { fit } = quick;
    return (
      <div class="measured">
        <p class="state-line" role="status">
          Quick fit of {fixedText(quick.start_s, 2)} to {fixedText(quick.end_s, 2)} s; the final numbers follow.
        </p>
        {fit.ok ? <NumbersTable of={numbersOfPreview(fit)} caption={`Quick fit of segment ${s.id}`} /> : null}
        {fit.curves ? <FitChart curves={fit.curves} id={s.id} /> : null}
        <CheckList checks={fit.checks} none="" />
        {fit.curves ? <SpectrumChart curves={fit.curves} id={s.id} /> : null}
      </div>
    );
  }
  if (!result) return <Waiting id={s.id} />;
  const drawn = curves.value.get(s.id);
  return (
    <div class="measured" data-stale={waiting || undefined}>
      {waiting ? <Waiting id={s.id} /> : null}
      {result.status === 'unmeasured' ? null : (
        <NumbersTable of={numbersOfResult(result)} caption={`Results of segment ${s.id}`} />
      )}
      {result.status === 'unmeasured' ? <CheckList checks={result.checks} none="" /> : null}
      {drawn ? <FitChart curves={drawn} id={s.id} /> : null}
      <p class="facts">
        {fixedText(result.cycles, 1)} cycles, {result.frames_used} of {result.frames} frames used
        {result.frames_lost > 0 ? `, ${result.frames_lost} lost` : ''}, residuals{' '}
        {fixedText(result.residual_rms_deg, 3)}° rms
        {result.swing_Hz === null
          ? ''
          : `, swing at ${fixedText(result.swing_Hz, 2)} Hz (${fixedText(100 * result.swing_share, 1)} %)`}
      </p>
      {result.status === 'unmeasured' ? null : (
        <CheckList checks={result.checks} none="No check found anything wrong." />
      )}
      {drawn ? <SpectrumChart curves={drawn} id={s.id} /> : null}
    </div>
  );
}

function Waiting({ id }: { id: string }) {
  const problem = problemOf.value.get(id);
  if (problem !== undefined)
    return <CheckList checks={[{ code: 'problem', severity: 'fault', message: problem }]} none="" />;
  const measuring = resultsState.value?.measuring;
  const share = measuring?.segment === id ? measuring.share : null;
  return (
    <p class="state-line" role="status">
      {share === null ? 'Waiting to be measured …' : `Being measured: ${Math.round(share * 100)} %`}
      {share === null ? null : <progress max="1" value={share} aria-label={`Measuring ${id}`} />}
    </p>
  );
}
