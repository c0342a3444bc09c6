import type { SessionView } from '../../contract.ts';
import { span } from '../state/board.ts';
import { follow, followedShare, following, stopFollowing } from '../state/following.ts';
import { frameTimes, recording, whole_s } from '../state/selection.ts';
import { traces } from '../state/traces.ts';

/** Following the bar of a view over the whole recording or over what the board shows. */
export function FollowPart({ of: v }: { of: SessionView }) {
  const now = following.value;
  const trace = traces.value.get(v.id);
  const part = span.value.end_s - span.value.start_s < whole_s.value - 0.01;
  const ready = recording.value?.state === 'ready';
  return (
    <section>
      <header class="sheet-head">
        <h2>Follow the bar</h2>
      </header>
      <p class="quiet">
        {trace?.length
          ? `${trace.length} poses of ${frameTimes.value?.length ?? 0} frames so far. Segments are measured by themselves, also where nothing was followed.`
          : 'Gives the angle over the whole recording, in which the steps can be seen and marked.'}
      </p>
      {now ? (
        <div class="entry-line">
          <progress max="1" value={followedShare.value} aria-label="Following" />
          <button type="button" disabled={now.stopping} onClick={() => void stopFollowing()}>
            {now.stopping ? 'Stopping …' : 'Stop'}
          </button>
        </div>
      ) : (
        <div class="entry-line">
          <button type="button" class="primary" disabled={!ready} onClick={() => void follow(v.id)}>
            {trace?.length ? 'Follow again' : 'Follow the whole recording'}
          </button>
          <button
            type="button"
            disabled={!ready || !part}
            onClick={() => void follow(v.id, span.value)}
            title="Only the stretch that the time board shows"
          >
            Stretch on the board
          </button>
        </div>
      )}
    </section>
  );
}
