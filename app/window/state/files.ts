import { effect, signal } from '@preact/signals';
import { CallError } from '../../contract/client.ts';
import type { ExportItem, FileToken, Saved } from '../../contract.ts';
import { tokenOfFile } from '../transport.ts';
import { askUser } from './dialogs.ts';
import { documentState, editsSettled, recordings } from './document.ts';
import { ask, hello, host, tellFailure } from './host.ts';
import { tell, tellMistake } from './notices.ts';

/** What is being opened or handed over just now, for the progress line; null: nothing. */
export const opening = signal<string | null>(null);

const SESSION_NAME = /\.json$/i;

/** Lets the user choose a file and opens it; `add`: a recording joins the session that is open. */
export async function chooseAndOpen(add = false): Promise<void> {
  if (!add && !(await mayReplace())) return;
  const chosen = await chooseFile(add ? 'recording' : 'open');
  if (chosen) await openToken(chosen, add);
}

/** Opens files that were dropped: a session first, then recordings that it misses. What the open session misses is no new session. */
export async function openFiles(files: readonly File[]): Promise<void> {
  const missed = (file: File) => recordings.value.some((r) => r.state === 'missing' && r.name === file.name);
  if (files.length > 0 && files.every(missed)) return joinSession(files);
  if (files.length === 0 || !(await mayReplace())) return;
  const sessions = files.filter((f) => SESSION_NAME.test(f.name));
  const others = files.filter((f) => !SESSION_NAME.test(f.name));
  const first = sessions[0] ?? others.shift();
  if (!first) return;
  const token = await handOver(first);
  if (token && (await openToken(token, false))) await joinSession(others);
}

/** Gives recordings to the session that is open: those it misses find their place, others are added. */
async function joinSession(files: readonly File[]): Promise<void> {
  for (const file of files) {
    await recordingsLookedFor();
    const known = recordings.value.find((r) => r.name === file.name);
    if (known?.state === 'ready' && known.facts?.bytes === file.size) continue;
    const next = await handOver(file);
    if (next && known?.state === 'missing') await locate(known.id, next);
    else if (next) await openToken(next, true);
  }
}

/** Resolves once it is known of every recording of the session whether it is where the session says. */
function recordingsLookedFor(): Promise<void> {
  return new Promise((resolve) => {
    const stop = effect(() => {
      if (recordings.value.some((r) => r.state === 'opening')) return;
      resolve();
      queueMicrotask(() => stop());
    });
  });
}

/** Opens what a token stands for. */
export async function openToken(token: FileToken, add: boolean): Promise<boolean> {
  opening.value = `Opening ${token.name}`;
  const opened = await ask('openFile', { token: token.token, ...(add ? { add: true } : {}) });
  opening.value = null;
  return opened !== null;
}

/** Opens the demo session. */
export async function openDemo(): Promise<void> {
  if (!(await mayReplace())) return;
  opening.value = 'Opening the demo session';
  await ask('openDemo', {});
  opening.value = null;
}

/** Opens a session used before. */
export async function openRecent(id: string): Promise<void> {
  if (await mayReplace()) await ask('openRecent', { id });
}

/** Asks about unsaved work, then opens what was named outside of the window. */
export async function openRequested(token: FileToken): Promise<void> {
  if (await mayReplace()) await openToken(token, false);
}

/** Closes the session, after asking about unsaved work. */
export async function closeDocument(): Promise<void> {
  if (await mayReplace()) await ask('closeDocument', {});
}

/** Lets the user show where a missing recording is now. */
export async function findRecording(id: string): Promise<void> {
  const chosen = await chooseFile('recording');
  if (chosen) await locate(id, chosen);
}

async function locate(recording: string, token: FileToken): Promise<void> {
  opening.value = `Looking at ${token.name}`;
  try {
    const { recognised } = await host().call('locateRecording', { recording, token: token.token });
    tell(recognised === 'same' ? `${token.name} is the same recording.` : `${token.name} is used as the recording.`);
  } catch (error) {
    if (!(error instanceof CallError) || error.reason !== 'bad_input') return tellFailure(error);
    const answer = await askUser({
      title: 'Another recording?',
      text: error.message,
      answers: ['Keep looking', 'Use it all the same'],
    });
    if (answer === 'Use it all the same') {
      await ask('locateRecording', { recording, token: token.token, evenIfDifferent: true });
    }
  } finally {
    opening.value = null;
  }
}

/** Saves the session in its place, or as a copy in a new one. True where it is saved. */
export async function save(asCopy = false): Promise<boolean> {
  await editsSettled();
  const saved = await ask('save', asCopy ? { asCopy: true } : {});
  return saved !== null && settle(saved, (token) => ask('save', { token }));
}

/** Writes one thing to a file of the user's. */
export async function exportItem(item: ExportItem): Promise<void> {
  await editsSettled();
  const saved = await ask('exportItem', { item });
  if (saved) await settle(saved, (token) => ask('exportItem', { item, token }));
}

/** Saves the report as a PDF; in a browser it is opened in a tab of its own and the browser's print dialog over it. */
export async function printReport(): Promise<void> {
  if (hello.value?.dialogs) return exportItem({ kind: 'report.pdf' });
  // The tab is opened at once: later the browser would take it for an advertisement.
  const tab = window.open('about:blank', '_blank');
  if (!tab) return tellMistake('The browser did not let the report open in a tab of its own. Allow it for this page.');
  await editsSettled();
  const page = await ask('exportItem', { item: { kind: 'report.pdf' } });
  if (page?.saved !== 'to_print') return tab.close();
  tab.location.replace(page.address);
  await loaded(tab, page.address);
  tab.print();
}

/** Resolves once a tab shows a page whole, or has been closed. */
function loaded(tab: Window, address: string): Promise<void> {
  return new Promise((resolve) => {
    const looking = setInterval(() => {
      const shown = !tab.closed && tab.location.pathname === address && tab.document.readyState === 'complete';
      if (!shown && !tab.closed) return;
      clearInterval(looking);
      resolve();
    }, 50);
  });
}

/** Writes everything that can be exported. */
export async function exportAll(): Promise<void> {
  await editsSettled();
  const folder = hello.value?.dialogs ? await ask('chooseFolder', {}) : null;
  if (hello.value?.dialogs && !folder) return;
  const all = await ask('exportAll', folder ? { token: folder.token } : {});
  for (const saved of all ?? []) await settle(saved, () => Promise.resolve(null), false);
  if (all?.length) tell(`${all.length} files exported.`);
}

/** Writes what the window drew itself. */
export async function saveDrawing(name: string, bytes: Uint8Array<ArrayBuffer>): Promise<void> {
  const saved = await ask('saveBytes', { name, bytes });
  if (saved) await settle(saved, (token) => ask('saveBytes', { name, bytes, token }));
}

/** Asks where to put it if need be, fetches a download, says what was done. */
async function settle(saved: Saved, again: (token: string) => Promise<Saved | null>, say = true): Promise<boolean> {
  if (saved.saved === 'needs_place') {
    const place = await ask('choosePlace', { suggestedName: saved.suggestedName });
    const next = place ? await again(place.token) : null;
    return next !== null && next.saved !== 'needs_place' && settle(next, again, say);
  }
  if (saved.saved === 'to_print') return false;
  if (saved.saved === 'download') {
    const link = document.createElement('a');
    link.href = saved.address;
    link.download = saved.name;
    link.click();
  }
  if (say) tell(saved.saved === 'file' ? `Saved as ${saved.name}.` : `${saved.name} is in the downloads.`);
  return true;
}

/** Whether what is open may be replaced: asks where there is unsaved work. */
export async function mayReplace(): Promise<boolean> {
  await editsSettled();
  const state = documentState.value;
  if (!state?.session || !state.dirty) return true;
  const name = state.fileName ?? state.session.title ?? 'The session';
  const answer = await askUser({
    title: 'Save the session first?',
    text: `${name} has changes that aren’t saved in a file of yours.`,
    answers: ['Save', 'Don’t save', 'Cancel'],
  });
  if (answer === 'Save') return save();
  return answer === 'Don’t save';
}

async function chooseFile(purpose: 'open' | 'recording'): Promise<FileToken | null> {
  if (hello.value?.dialogs) return ask('chooseFile', { purpose });
  const file = await pickInBrowser(purpose);
  return file ? handOver(file) : null;
}

function pickInBrowser(purpose: 'open' | 'recording'): Promise<File | null> {
  return new Promise((resolve) => {
    const input = document.createElement('input');
    input.type = 'file';
    const videos = 'video/*,.mkv,.mov,.avi,.mp4,.webm,.m4v,.mts';
    input.accept = purpose === 'open' ? `${videos},.json` : videos;
    input.addEventListener('change', () => resolve(input.files?.[0] ?? null), { once: true });
    input.addEventListener('cancel', () => resolve(null), { once: true });
    input.click();
  });
}

async function handOver(file: File): Promise<FileToken | null> {
  opening.value = `Handing over ${file.name}`;
  try {
    return await tokenOfFile(file);
  } catch (error) {
    tellFailure(error);
    return null;
  } finally {
    opening.value = null;
  }
}
