import { commands } from '../../contract.ts';
import { middleRegion, setRegion } from '../picture/drags.ts';
import { run } from '../state/command-table.ts';
import { dialog } from '../state/dialogs.ts';
import { markStart } from '../state/mark.ts';
import { drawing } from '../state/picture-tools.ts';
import { matches, worksInFields } from './accelerators.ts';

const MAC = /mac/i.test(navigator.userAgent);

/** Turns key presses into commands, unless what has the keyboard needs the key itself. */
export function listenForKeys(): void {
  window.addEventListener('keydown', (event) => {
    if (event.defaultPrevented || event.isComposing || dialog.value) return;
    const target = event.target instanceof Element ? event.target : document.body;
    if (drawing.value !== null && takesDrawingKey(event, target)) return event.preventDefault();
    if (event.key === 'Escape' && markStart.value !== null) {
      markStart.value = null;
      return event.preventDefault();
    }
    // A second spelling of redo that many people's fingers know.
    if (matches(event, 'CmdOrCtrl+Y', MAC) && !isField(target)) {
      run('redo');
      return event.preventDefault();
    }
    const command = commands.find((c) => c.accelerator !== null && matches(event, c.accelerator, MAC));
    if (!command?.accelerator || needsKey(target, event.key, worksInFields(command.accelerator), command.id)) return;
    event.preventDefault();
    run(command.id);
  });
}

/** While a region is to be drawn, Enter puts one in the middle and Escape gives up. */
function takesDrawingKey(event: KeyboardEvent, target: Element): boolean {
  if (event.key === 'Escape') {
    drawing.value = null;
    return true;
  }
  if (event.key !== 'Enter' || isField(target)) return false;
  setRegion(middleRegion());
  requestAnimationFrame(() => document.querySelector<SVGElement>('[data-entry="region"]')?.focus());
  return true;
}

function isField(target: Element): boolean {
  return target.matches('input:not([type=radio], [type=checkbox], [type=range]), textarea, select');
}

function needsKey(target: Element, key: string, inFields: boolean, id: string): boolean {
  // In a text field undo and redo are the field's own.
  if (isField(target))
    return (
      !inFields ||
      ((id === 'undo' || id === 'redo') && target.matches('input[type=text], input:not([type])') && isChanged(target))
    );
  if (target.matches('input[type=range], input[type=radio]')) return key.startsWith('Arrow');
  if (target.matches('button, [role=menuitem], [role=tab], summary, a')) return key === ' ' || key === 'Enter';
  return false;
}

function isChanged(target: Element): boolean {
  return target instanceof HTMLInputElement && target.value !== target.defaultValue;
}
