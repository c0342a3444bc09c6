import { type Command, commands, type Menu, menuLabels } from '../../contract.ts';
import { keysText } from '../menu/accelerators.ts';
import { closeDialog } from '../state/dialogs.ts';
import { DialogFrame } from './dialog-frame.tsx';

/** Keys that belong to one place rather than to a command. */
const PLACES: readonly (readonly [string, string])[] = [
  ['Region or lens on the picture', 'Arrows move, Alt+arrows resize, Shift by ten pixels'],
  ['Guide over the picture', 'Arrows by one, Shift+arrows by ten'],
  ['Edge of a segment', 'Arrows by a frame, Shift+arrows by a second'],
  ['Current', 'Enter takes it and goes on to the next segment'],
  ['Time board', 'Wheel zooms, Shift+wheel moves along'],
  ['Picture', 'Wheel zooms, dragging beside the region moves it'],
];

/** A command's words, where a browser shows the window or the shell. */
const labelHere = (command: Command) => (globalThis.needlebeat ? command.label : (command.inBrowser ?? command.label));

/** All shortcuts, by menu. */
export function ShortcutList() {
  const menus = Object.keys(menuLabels) as Menu[];
  return (
    <DialogFrame title="Keyboard shortcuts" wide>
      <div class="shortcut-columns">
        {menus.map((menu) => {
          const own = commands.filter((c) => c.menu === menu && c.accelerator !== null);
          return own.length === 0 ? null : (
            <section key={menu}>
              <h3>{menuLabels[menu]}</h3>
              <dl>
                {own.map((c) => (
                  <div key={c.id}>
                    <dt>{labelHere(c).replace('…', '')}</dt>
                    <dd>
                      <kbd>{keysText(c.accelerator ?? '')}</kbd>
                    </dd>
                  </div>
                ))}
              </dl>
            </section>
          );
        })}
        <section>
          <h3>In their places</h3>
          <dl>
            {PLACES.map(([where, what]) => (
              <div key={where} class="stacked">
                <dt>{where}</dt>
                <dd>{what}</dd>
              </div>
            ))}
          </dl>
        </section>
      </div>
      <div class="dialog-buttons">
        <button type="button" class="primary" onClick={() => closeDialog()}>
          Close
        </button>
      </div>
    </DialogFrame>
  );
}
