import { batch, effect } from '@preact/signals';
import type { HostClient } from '../../contract/client.ts';
import { CONTRACT_VERSION, type DocumentState } from '../../contract.ts';
import { keepBar } from './bar.ts';
import { keepMenuState, run } from './command-table.ts';
import { documentState, takeDocument } from './document.ts';
import { openRequested } from './files.ts';
import { forgetFilm, takeFilmPicture } from './film-strip.ts';
import { resumeFollowing, takeJobEnd, takeProgress } from './following.ts';
import { forgetFrameTimes, keepFrameTimes } from './frame-times.ts';
import { ask, hello, useHost } from './host.ts';
import { keepLayout, takeLayout } from './layout.ts';
import { tell } from './notices.ts';
import { forgetPicture, keepPicture } from './pictures.ts';
import { takePlayEnd, takePlayFrame } from './player.ts';
import { curves, dropPreview, takeResults } from './results.ts';
import { forgetSelection, selectSegment, sheet, views } from './selection.ts';
import { forgetTraces, readOverview, takePoses, traces } from './traces.ts';

/** Ties the window's state to a host: what it pushes goes to where it is kept. */
export async function startWith(client: HostClient): Promise<void> {
  useHost(client);
  client.on('document', receive);
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
  keepOverviews();
  hello.value = await ask('hello', { contract: CONTRACT_VERSION });
  const layout = await ask('layout', {});
  if (layout) takeLayout(layout);
  const state = await ask('getDocument', {});
  if (state) receive(state);
  // Work that goes on goes on at the sheet where it was left.
  if (layout && state?.session?.segments.length) sheet.value = layout.sheet;
  keepLayout();
  const results = await ask('results', {});
  if (results) takeResults(results);
  await resumeFollowing();
  if (documentState.value?.restored) tell('The session was brought back as it was before the program ended.');
}

let known: string | null = null;

/** Takes the document; where it is another one, first forgets what belonged to the one before. */
function receive(state: DocumentState): void {
  batch(() => {
    const another = state.key !== known;
    known = state.key;
    if (another) forget();
    takeDocument(state);
    if (!another) return;
    const first = state.session?.segments[0];
    sheet.value = first ? 'segment' : 'view';
    if (first) selectSegment(first.id);
  });
}

function forget(): void {
  forgetSelection();
  forgetTraces();
  forgetPicture();
  forgetFrameTimes();
  forgetFilm();
  dropPreview();
  curves.value = new Map();
}

/** Reads what has been followed of each view that comes to sight. */
function keepOverviews(): void {
  effect(() => {
    for (const { id } of views.value) if (!traces.peek().has(id)) void readOverview(id);
  });
}
