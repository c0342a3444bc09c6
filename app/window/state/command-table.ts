import { computed, effect } from '@preact/signals';
import { type Command, type CommandId, type CommandState, commands, isEnabled } from '../../contract.ts';
import { addSegment, changeSegment, removeSegment } from '../session-edits/segment-edits.ts';
import { markedStretch, neighbour } from '../time-board/marking.ts';
import { revealCursor, showAround, showWhole, zoomBoard } from './board.ts';
import { copyTable, exportPlot } from './copies.ts';
import { askText, dialog } from './dialogs.ts';
import { documentState, edit, session, step } from './document.ts';
import { chooseAndOpen, closeDocument, exportAll, exportItem, openDemo, printReport, save } from './files.ts';
import { follow, following, stopFollowing } from './following.ts';
import { ask, hello } from './host.ts';
import { markStart } from './mark.ts';
import { tell } from './notices.ts';
import { drawing, zoomPicture } from './picture-tools.ts';
import { playing } from './pictures.ts';
import { playOrPause } from './player.ts';
import { resultsState } from './results.ts';
import {
  cursor_s,
  moveCursor,
  recording,
  segment,
  segments,
  selectSegment,
  sheet,
  stepFrames,
  view,
  whole_s,
} from './selection.ts';

/** What the commands need to know to be enabled. */
export const commandState = computed<CommandState>(() => ({
  recording: recording.value?.state === 'ready',
  view: view.value !== null,
  segment: segment.value !== null,
  results: (resultsState.value?.results?.segments.length ?? 0) > 0,
  canUndo: documentState.value?.canUndo ?? false,
  canRedo: documentState.value?.canRedo ?? false,
  busy: following.value !== null,
}));

const handlers: Readonly<Record<CommandId, () => unknown>> = {
  open: () => chooseAndOpen(),
  'open-demo': openDemo,
  'add-recording': () => chooseAndOpen(true),
  save: () => save(),
  'save-as': () => save(true),
  'close-session': closeDocument,
  'export-all': exportAll,
  'export-csv': () => exportItem({ kind: 'results.csv' }),
  'export-json': () => exportItem({ kind: 'results.json' }),
  'export-traces': exportTraces,
  'export-report': () => exportItem({ kind: 'report' }),
  'report-pdf': printReport,
  'export-plot-svg': () => exportPlot('svg'),
  'export-plot-png': () => exportPlot('png'),
  undo: () => step('undo'),
  redo: () => step('redo'),
  'copy-table': copyTable,
  'sheet-view': () => openSheet('view'),
  'sheet-segment': () => openSheet('segment'),
  'sheet-field': () => openSheet('field'),
  'sheet-apparatus': () => openSheet('apparatus'),
  'draw-region': () => {
    drawing.value = drawing.value === null ? 'region' : null;
  },
  'zoom-in': () => zoomPicture(1.25),
  'zoom-out': () => zoomPicture(0.8),
  'zoom-fit': () => zoomPicture(0),
  follow: () => (view.value ? follow(view.value.id) : undefined),
  cancel: stopFollowing,
  play: () => playOrPause(),
  'frame-back': () => move(() => stepFrames(-1)),
  'frame-forward': () => move(() => stepFrames(1)),
  'second-back': () => move(() => moveCursor(cursor_s.value - 1)),
  'second-forward': () => move(() => moveCursor(cursor_s.value + 1)),
  'time-zoom-in': () => zoomBoard(1.5),
  'time-zoom-out': () => zoomBoard(1 / 1.5),
  'time-zoom-fit': showWhole,
  'segment-start': startHere,
  'segment-end': endHere,
  'segment-previous': () => selectNeighbour(-1),
  'segment-next': () => selectNeighbour(1),
  'play-segment': playSegment,
  'edit-current': () => {
    sheet.value = 'segment';
    requestAnimationFrame(() => focusEntry('current'));
  },
  'leave-out': leaveOut,
  'delete-segment': () => {
    const id = segment.value?.id;
    if (id) edit(`Delete segment ${id}`, (s) => removeSegment(s, id));
  },
  shortcuts: () => {
    dialog.value = { kind: 'shortcuts' };
  },
  about: () => {
    dialog.value = { kind: 'about' };
  },
};

/** Carries out a command if it is enabled now. */
export function run(id: CommandId): void {
  const command: Command | undefined = commands.find((c) => c.id === id);
  if (command && isEnabled(command, commandState.value)) void handlers[id]();
}

/** Keeps the native menu's enabled entries up to date, where there is one. */
export function keepMenuState(): () => void {
  return effect(() => {
    const state = commandState.value;
    const { undoLabel = null, redoLabel = null } = documentState.value ?? {};
    if (hello.value?.dialogs) void ask('menuState', { state, undoLabel, redoLabel });
  });
}

/** Selects the segment before or after, shows it and puts the cursor at its start. */
export function selectNeighbour(by: 1 | -1): void {
  const id = neighbour(segments.value, segment.value?.id ?? null, by);
  if (id === null) return;
  selectSegment(id);
  const found = segment.value;
  if (found) moveCursor(found.start_s);
  revealCursor();
}

/** Asks for the reason and leaves the selected segment out of the reduction, or takes it in again. */
export async function leaveOut(): Promise<void> {
  const s = segment.value;
  if (!s) return;
  if (s.left_out !== undefined) {
    edit(`Take segment ${s.id} in again`, (all) => changeSegment(all, s.id, { left_out: undefined }));
    return;
  }
  const reason = await askText({
    title: `Leave segment ${s.id} out of the reduction`,
    label: 'Reason (it stands in the results)',
    text: '',
    action: 'Leave out',
  });
  if (reason !== null) {
    edit(`Leave segment ${s.id} out`, (all) =>
      changeSegment(all, s.id, { left_out: reason.trim() || 'left out by the user' }),
    );
  }
}

/** Marks a stretch as a segment of the view shown, selects it and opens its sheet. */
export function mark(start_s: number, end_s: number): void {
  const r = recording.value;
  const v = view.value;
  if (!session.value || !r) return;
  if (!v) {
    tell('Draw the region around the bar first: a segment is followed in it.');
    return;
  }
  const stretch = markedStretch(session.value, r.id, start_s, end_s, whole_s.value);
  if (!stretch) {
    tell('A segment can’t begin inside another one, and needs at least 0.3 s.');
    return;
  }
  let id: string | null = null;
  edit('Mark a segment', (s) => {
    const added = addSegment(s, { recording: r.id, view: v.id, ...stretch });
    id = added.id;
    return added.session;
  });
  selectSegment(id);
  sheet.value = 'segment';
}

/** Puts the keyboard into an entry field of the sheet that is open. */
export function focusEntry(name: string): void {
  const field = document.querySelector<HTMLInputElement>(`[data-entry="${name}"]`);
  field?.focus();
  field?.select();
}

/** Zooms the board to the selected segment. */
export function showSegment(): void {
  if (segment.value) showAround(segment.value);
}

/** Plays the selected segment from its start to its end, or stops. */
async function playSegment(): Promise<void> {
  const s = segment.value;
  if (!s) return;
  if (playing.value === null) moveCursor(s.start_s);
  await playOrPause(s.end_s);
}

function openSheet(name: 'view' | 'segment' | 'field' | 'apparatus'): void {
  sheet.value = name;
}

function move(cursor: () => void): void {
  cursor();
  revealCursor();
}

function startHere(): void {
  markStart.value = cursor_s.value;
  tell('The segment starts here; go to its end and press E.');
}

function endHere(): void {
  const start_s = markStart.value;
  if (start_s === null) tell('Press B where the segment begins first.');
  else mark(start_s, cursor_s.value);
  markStart.value = null;
}

async function exportTraces(): Promise<void> {
  for (const { id } of resultsState.value?.results?.segments ?? []) await exportItem({ kind: 'trace', segment: id });
}
