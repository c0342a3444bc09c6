import { useSignal } from '@preact/signals';
import { useEffect, useRef } from 'preact/hooks';
import { type Command, commands, isEnabled, type Menu, menuLabels } from '../../contract.ts';
import { commandState, run } from '../state/command-table.ts';
import { documentState } from '../state/document.ts';
import { keysText } from './accelerators.ts';

/** Commands that begin a new group within their menu. */
const GROUPS: ReadonlySet<string> = new Set([
  'save',
  'export-all',
  'copy-table',
  'zoom-in',
  'follow',
  'frame-back',
  'time-zoom-in',
  'segment-previous',
  'edit-current',
  'delete-segment',
  'about',
]);

const MENUS = Object.keys(menuLabels) as Menu[];

/** The menus, where the shell has none of its own. Keyboard as usual for menu bars: arrows, Enter, Escape, first letters. */
export function MenuBar() {
  const open = useSignal<Menu | null>(null);
  const bar = useRef<HTMLDivElement>(null);

  useEffect(() => {
    const close = (event: PointerEvent) => {
      if (!bar.current?.contains(event.target as Node)) open.value = null;
    };
    document.addEventListener('pointerdown', close);
    return () => document.removeEventListener('pointerdown', close);
  }, []);

  function show(menu: Menu, focus: boolean): void {
    open.value = menu;
    if (focus) requestAnimationFrame(() => items()[0]?.focus());
  }
  const items = () => [...(bar.current?.querySelectorAll<HTMLElement>('.menu-list [role=menuitem]') ?? [])];

  function keys(event: KeyboardEvent): void {
    const all = items();
    const here = all.indexOf(document.activeElement as HTMLElement);
    const now = open.value;
    const sideways = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (sideways !== 0) {
      const heads = [...(bar.current?.querySelectorAll<HTMLElement>('.menu-head') ?? [])];
      const place = now ? MENUS.indexOf(now) : heads.indexOf(document.activeElement as HTMLElement);
      const next = (place + sideways + MENUS.length) % MENUS.length;
      if (now && here >= 0) show(MENUS[next]!, true);
      else {
        if (now) open.value = MENUS[next]!;
        heads[next]?.focus();
      }
    } else if (event.key === 'ArrowDown') {
      if (!now || here === -1) show(now ?? MENUS[headPlace()]!, true);
      else all[(here + 1) % all.length]?.focus();
    } else if (event.key === 'ArrowUp' && here >= 0) all[(here - 1 + all.length) % all.length]?.focus();
    else if (event.key === 'Home' && here >= 0) all[0]?.focus();
    else if (event.key === 'End' && here >= 0) all.at(-1)?.focus();
    else if (event.key === 'Escape' && now) {
      const head = bar.current?.querySelector<HTMLElement>(`[data-menu="${now}"]`);
      open.value = null;
      head?.focus();
    } else if (event.key.length === 1 && event.key !== ' ' && here >= 0 && !event.ctrlKey && !event.metaKey) {
      const letter = event.key.toLowerCase();
      [...all.slice(here + 1), ...all].find((item) => item.textContent?.toLowerCase().startsWith(letter))?.focus();
    } else return;
    event.preventDefault();
    event.stopPropagation();
  }

  function headPlace(): number {
    const heads = [...(bar.current?.querySelectorAll<HTMLElement>('.menu-head') ?? [])];
    return Math.max(0, heads.indexOf(document.activeElement as HTMLElement));
  }

  return (
    <div ref={bar} class="menu-bar" role="menubar" aria-label="Menus" onKeyDown={keys}>
      {MENUS.map((menu, i) => (
        <div key={menu} class="menu">
          <button
            type="button"
            class="menu-head"
            data-menu={menu}
            role="menuitem"
            aria-haspopup="menu"
            aria-expanded={open.value === menu}
            tabIndex={i === 0 ? 0 : -1}
            onClick={() => {
              open.value = open.value === menu ? null : menu;
            }}
            onPointerEnter={() => {
              if (open.value !== null) open.value = menu;
            }}
          >
            {menuLabels[menu]}
          </button>
          {open.value === menu ? (
            <div class="menu-list" role="menu" aria-label={menuLabels[menu]}>
              {commands
                .filter((c) => c.menu === menu)
                .map((c) => (
                  <Item key={c.id} command={c} onDone={() => (open.value = null)} />
                ))}
            </div>
          ) : null}
        </div>
      ))}
    </div>
  );
}

function Item({ command, onDone }: { command: Command; onDone(): void }) {
  const enabled = isEnabled(command, commandState.value);
  const what =
    command.id === 'undo'
      ? documentState.value?.undoLabel
      : command.id === 'redo'
        ? documentState.value?.redoLabel
        : null;
  return (
    <button
      type="button"
      role="menuitem"
      tabIndex={-1}
      aria-disabled={!enabled}
      data-command={command.id}
      data-group={GROUPS.has(command.id) || undefined}
      onClick={() => {
        if (!enabled) return;
        onDone();
        run(command.id);
      }}
    >
      <span>
        {command.inBrowser ?? command.label}
        {enabled && what ? `: ${what}` : ''}
      </span>
      {command.accelerator === null ? null : <kbd>{keysText(command.accelerator)}</kbd>}
    </button>
  );
}
