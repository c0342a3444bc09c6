/** What must be so for a command to be enabled. */
export interface CommandState {
  /** A session with a recording that can be read is open. */
  readonly recording: boolean;
  /** A region has been drawn on the recording shown. */
  readonly view: boolean;
  /** A segment is selected. */
  readonly segment: boolean;
  /** At least one segment has results. */
  readonly results: boolean;
  readonly canUndo: boolean;
  readonly canRedo: boolean;
  /** A job runs that can be cancelled. */
  readonly busy: boolean;
}

export type Menu = 'file' | 'edit' | 'sheets' | 'picture' | 'time' | 'segment' | 'help';

interface CommandEntry {
  readonly id: string;
  readonly menu: Menu;
  readonly label: string;
  /** What it is called where a browser shows the window and does it in its own way; left out: the same. */
  readonly inBrowser?: string;
  /**
   * In Electron's accelerator notation (https://www.electronjs.org/docs/latest/api/accelerator), null: none.
   * Without CmdOrCtrl it is for the window alone and is not obeyed while a text field has the focus.
   */
  readonly accelerator: string | null;
  /** All of these must be true in `CommandState`. */
  readonly needs: readonly (keyof CommandState)[];
}

/** Every command, in the order of the menus; a new `menu` starts the next menu. */
export const commands = [
  { id: 'open', menu: 'file', label: 'Open…', accelerator: 'CmdOrCtrl+O', needs: [] },
  { id: 'open-demo', menu: 'file', label: 'Open the demo session', accelerator: null, needs: [] },
  { id: 'add-recording', menu: 'file', label: 'Add a recording…', accelerator: null, needs: ['recording'] },
  { id: 'save', menu: 'file', label: 'Save', accelerator: 'CmdOrCtrl+S', needs: ['recording'] },
  { id: 'save-as', menu: 'file', label: 'Save as…', accelerator: 'CmdOrCtrl+Shift+S', needs: ['recording'] },
  { id: 'close-session', menu: 'file', label: 'Close the session', accelerator: null, needs: ['recording'] },
  { id: 'export-all', menu: 'file', label: 'Export everything…', accelerator: 'CmdOrCtrl+E', needs: ['results'] },
  { id: 'export-csv', menu: 'file', label: 'Export table (CSV)…', accelerator: null, needs: ['results'] },
  { id: 'export-json', menu: 'file', label: 'Export results (JSON)…', accelerator: null, needs: ['results'] },
  { id: 'export-traces', menu: 'file', label: 'Export traces (CSV)…', accelerator: null, needs: ['results'] },
  { id: 'export-report', menu: 'file', label: 'Export report (HTML)…', accelerator: null, needs: ['results'] },
  {
    id: 'report-pdf',
    menu: 'file',
    label: 'Save report as PDF…',
    inBrowser: 'Print the report or save it as PDF…',
    accelerator: 'CmdOrCtrl+P',
    needs: ['results'],
  },
  { id: 'export-plot-svg', menu: 'file', label: 'Export plot (SVG)…', accelerator: null, needs: ['results'] },
  { id: 'export-plot-png', menu: 'file', label: 'Export plot (PNG)…', accelerator: null, needs: ['results'] },
  { id: 'undo', menu: 'edit', label: 'Undo', accelerator: 'CmdOrCtrl+Z', needs: ['canUndo'] },
  { id: 'redo', menu: 'edit', label: 'Redo', accelerator: 'CmdOrCtrl+Shift+Z', needs: ['canRedo'] },
  { id: 'copy-table', menu: 'edit', label: 'Copy table', accelerator: 'CmdOrCtrl+Shift+C', needs: ['results'] },
  { id: 'sheet-view', menu: 'sheets', label: 'View sheet', accelerator: '1', needs: ['recording'] },
  { id: 'sheet-segment', menu: 'sheets', label: 'Segment sheet', accelerator: '2', needs: ['recording'] },
  { id: 'sheet-field', menu: 'sheets', label: 'Field sheet', accelerator: '3', needs: ['recording'] },
  { id: 'sheet-apparatus', menu: 'sheets', label: 'Apparatus sheet', accelerator: '4', needs: ['recording'] },
  { id: 'draw-region', menu: 'picture', label: 'Draw a region', accelerator: 'R', needs: ['recording'] },
  { id: 'zoom-in', menu: 'picture', label: 'Zoom in', accelerator: '+', needs: ['recording'] },
  { id: 'zoom-out', menu: 'picture', label: 'Zoom out', accelerator: '-', needs: ['recording'] },
  { id: 'zoom-fit', menu: 'picture', label: 'Whole picture', accelerator: '0', needs: ['recording'] },
  { id: 'follow', menu: 'picture', label: 'Follow the bar', accelerator: 'F', needs: ['view'] },
  { id: 'cancel', menu: 'picture', label: 'Stop following', accelerator: 'Esc', needs: ['busy'] },
  { id: 'play', menu: 'time', label: 'Play or pause', accelerator: 'Space', needs: ['recording'] },
  { id: 'frame-back', menu: 'time', label: 'One frame back', accelerator: 'Left', needs: ['recording'] },
  { id: 'frame-forward', menu: 'time', label: 'One frame on', accelerator: 'Right', needs: ['recording'] },
  { id: 'second-back', menu: 'time', label: 'One second back', accelerator: 'Shift+Left', needs: ['recording'] },
  { id: 'second-forward', menu: 'time', label: 'One second on', accelerator: 'Shift+Right', needs: ['recording'] },
  { id: 'time-zoom-in', menu: 'time', label: 'Shorter stretch', accelerator: 'Shift+Up', needs: ['recording'] },
  { id: 'time-zoom-out', menu: 'time', label: 'Longer stretch', accelerator: 'Shift+Down', needs: ['recording'] },
  { id: 'time-zoom-fit', menu: 'time', label: 'Whole recording', accelerator: 'Shift+0', needs: ['recording'] },
  { id: 'segment-start', menu: 'segment', label: 'Segment starts here', accelerator: 'B', needs: ['view'] },
  { id: 'segment-end', menu: 'segment', label: 'Segment ends here', accelerator: 'E', needs: ['view'] },
  { id: 'segment-previous', menu: 'segment', label: 'Previous segment', accelerator: 'PageUp', needs: ['recording'] },
  { id: 'segment-next', menu: 'segment', label: 'Next segment', accelerator: 'PageDown', needs: ['recording'] },
  { id: 'play-segment', menu: 'segment', label: 'Play it', accelerator: 'Shift+Space', needs: ['segment'] },
  { id: 'edit-current', menu: 'segment', label: 'Type its current', accelerator: 'C', needs: ['segment'] },
  { id: 'leave-out', menu: 'segment', label: 'Leave out or take in…', accelerator: 'L', needs: ['segment'] },
  { id: 'delete-segment', menu: 'segment', label: 'Delete segment', accelerator: 'Delete', needs: ['segment'] },
  { id: 'shortcuts', menu: 'help', label: 'Keyboard shortcuts', accelerator: 'F1', needs: [] },
  { id: 'about', menu: 'help', label: 'About Needlebeat', accelerator: null, needs: [] },
] as const satisfies readonly CommandEntry[];

export type CommandId = (typeof commands)[number]['id'];
export type Command = CommandEntry & { readonly id: CommandId };

/** Headings of the menus, in order. */
export const menuLabels: Readonly<Record<Menu, string>> = {
  file: 'File',
  edit: 'Edit',
  sheets: 'Sheets',
  picture: 'Picture',
  time: 'Time',
  segment: 'Segment',
  help: 'Help',
};

/** Whether a command can be given now. */
export function isEnabled(command: Command, state: CommandState): boolean {
  return command.needs.every((need) => state[need]);
}
