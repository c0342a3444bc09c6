import { MenuBar } from './menu/menu-bar.tsx';
import { durationText, fixedText } from './numbers/quantity-text.ts';
import { documentState, session } from './state/document.ts';
import { opening } from './state/files.ts';
import { followedShare, following, stopFollowing } from './state/following.ts';
import { hostGone } from './state/host.ts';
import { resultsState } from './state/results.ts';

/** Menus (where the shell has none), what is open, and what is going on. */
export function TopBar() {
  return (
    <header class="top-bar">
      {globalThis.needlebeat ? null : <MenuBar />}
      <DocumentName />
      <span class="spacer" />
      <Work />
    </header>
  );
}

function DocumentName() {
  const state = documentState.value;
  if (!state?.session) return <span class="document-name" />;
  const name = session.value?.title || state.fileName || 'New session';
  return (
    <span class="document-name">
      <b>{name}</b>
      <span class="quiet">
        {state.fileName === null
          ? 'not saved in a file yet'
          : state.dirty
            ? `${state.fileName}, changed`
            : state.fileName}
      </span>
    </span>
  );
}

function Work() {
  if (hostGone.value) {
    return (
      <span class="work-line" role="alert">
        The measuring part of the program has ended. Start Needlebeat again; the session is kept.
      </span>
    );
  }
  if (opening.value !== null) {
    return (
      <span class="work-line" role="status">
        {opening.value} …
      </span>
    );
  }
  if (following.value) return <FollowLine />;
  const { pending = [], measuring = null } = resultsState.value ?? {};
  if (pending.length === 0) return null;
  return (
    <span class="work-line" role="status">
      Measuring {measuring ? `${measuring.segment} ` : ''}({pending.length} to go)
      {measuring ? <progress max="1" value={measuring.share} aria-label="Measuring" /> : null}
    </span>
  );
}

function FollowLine() {
  const now = following.value;
  const p = now?.progress;
  if (!now) return null;
  return (
    <span class="work-line">
      <span role="status">Following {now.view}</span>
      <progress max="1" value={followedShare.value} aria-label={`Following ${now.view}`} />
      <span class="quiet progress-words">
        {p
          ? `${fixedText(p.done_s, 0)} of ${fixedText(p.total_s, 0)} s` +
            (p.rate === null ? '' : `, ${fixedText(p.rate, 1)} × real time`) +
            (p.frameRate_Hz === null ? '' : ` (${fixedText(p.frameRate_Hz, 0)} frames/s)`) +
            (p.remaining_s === null ? '' : `, ${durationText(p.remaining_s)} left`)
          : 'starting …'}
      </span>
      <button type="button" disabled={now.stopping} title="Stop following (Esc)" onClick={() => void stopFollowing()}>
        {now.stopping ? 'Stopping …' : 'Stop'}
      </button>
    </span>
  );
}
