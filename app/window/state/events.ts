import { effect } from '@preact/signals';
import type { HostClient } from '../../contract/client.ts';
import { CONTRACT_VERSION } from '../../contract.ts';
import { keepBar } from './bar.ts';
import { keepMenuState, run } from './command-table.ts';
import { documentState, readDocument, takeDocument } from './document.ts';
import { openRequested } from './files.ts';
import { forgetFilm, takeFilmPicture } from './film-strip.ts';
import { resumeFollowing, takeJobEnd, takeProgress } from './following.ts';
import { forgetFrameTimes, keepFrameTimes } from './frame-times.ts';
import { ask, hello, useHost } from './host.ts';
import { tell } from './notices.ts';
import { forgetPicture, keepPicture } from './pictures.ts';
import { takePlayEnd, takePlayFrame } from './player.ts';
import { curves, dropPreview, takeResults } from './results.ts';
import { forgetSelection, selectSegment, sheet, views } from './selection.ts';
import { forgetTraces, readOverview, takePoses, traces } from './traces.ts';

/** Ties the window's state to a host: what it pushes goes to where it is kept. */
export async function startWith(client: HostClient): Promise<void> {
  useHost(client);
  client.on('document', takeDocument);
  client.on('results', takeResults);
  client.on('progress', takeProgress);
  client.on('poses', ({ view, from_s, to_s, trace }) => takePoses(view, from_s, to_s, trace));
  client.on('filmStripPicture', ({ job, position, picture }) => void takeFilmPicture(job, position, picture));
  client.on('playFrame', ({ job, picture }) => takePlayFrame(job, picture));
  client.on('jobEnded', ({ job, error }) => {
    takeJobEnd(job, error);
    takePlayEnd(job);
  });
  client.on('command', ({ id }) => run(id));
  client.on('openRequest', (token) => void openRequested(token));
  keepFrameTimes();
  keepPicture();
  keepMenuState();
  keepBar();
  watchDocument();
  hello.value = await ask('hello', { contract: CONTRACT_VERSION });
  await readDocument();
  const results = await ask('results', {});
  if (results) takeResults(results);
  await resumeFollowing();
  if (documentState.value?.restored) tell('The session was brought back as it was before the program ended.');
}

/** Forgets what belongs to one document when another is opened. */
function watchDocument(): void {
  let known: string | null = null;
  effect(() => {
    const state = documentState.value;
    if (state === null || state.key === known) return;
    known = state.key;
    const now = state.session;
    forgetSelection();
    forgetTraces();
    forgetPicture();
    forgetFrameTimes();
    forgetFilm();
    dropPreview();
    curves.value = new Map();
    sheet.value = now && now.segments.length > 0 ? 'segment' : 'view';
    const first = now?.segments[0];
    if (first) selectSegment(first.id);
  });
  effect(() => {
    for (const { id } of views.value) if (!traces.peek().has(id)) void readOverview(id);
  });
}
