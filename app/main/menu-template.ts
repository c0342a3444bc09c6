import type { MenuItemConstructorOptions } from 'electron';
import {
  type Command,
  type CommandId,
  type CommandState,
  commands,
  isEnabled,
  type Menu,
  menuLabels,
} from '../contract.ts';

/** What the menu shows. */
export interface MenuFacts {
  readonly state: CommandState;
  readonly undoLabel: string | null;
  readonly redoLabel: string | null;
}

/** The menu before the window has said anything. */
export const firstMenu: MenuFacts = {
  state: {
    recording: false,
    view: false,
    segment: false,
    results: false,
    canUndo: false,
    canRedo: false,
    busy: false,
  },
  undoLabel: null,
  redoLabel: null,
};

/** The native menu, made from the table of commands. @param give passes a command on to the window. */
export function menuTemplate(
  facts: MenuFacts,
  platform: NodeJS.Platform,
  give: (id: CommandId) => void,
): MenuItemConstructorOptions[] {
  const menus = [...new Set(commands.map((c): Menu => c.menu))].map((menu): MenuItemConstructorOptions => {
    const items = commands.filter((c) => c.menu === menu).map((c) => item(c, facts, give));
    const extra = extras(menu, platform);
    return { label: menuLabels[menu], submenu: [...items, ...extra] };
  });
  return platform === 'darwin' ? [{ role: 'appMenu' }, ...menus] : menus;
}

function item(command: Command, facts: MenuFacts, give: (id: CommandId) => void): MenuItemConstructorOptions {
  const { accelerator } = command;
  return {
    id: command.id,
    label: labelOf(command, facts),
    enabled: isEnabled(command, facts.state),
    click: () => give(command.id),
    // Keys without CmdOrCtrl belong to the window, which knows whether somebody is typing: they are shown here only.
    ...(accelerator !== null && { accelerator, registerAccelerator: accelerator.startsWith('CmdOrCtrl+') }),
  };
}

function labelOf({ id, label }: Command, facts: MenuFacts): string {
  const what = id === 'undo' ? facts.undoLabel : id === 'redo' ? facts.redoLabel : null;
  return what === null ? label : `${label}: ${what}`;
}

function extras(menu: Menu, platform: NodeJS.Platform): MenuItemConstructorOptions[] {
  const line = { type: 'separator' } as const;
  if (menu === 'file') return [line, { role: platform === 'darwin' ? 'close' : 'quit' }];
  if (menu === 'edit') return [line, { role: 'cut' }, { role: 'copy' }, { role: 'paste' }, { role: 'selectAll' }];
  return [];
}
