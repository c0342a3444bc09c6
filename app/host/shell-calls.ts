import type { Parts, Some } from './parts.ts';
import { Refusal } from './serve-window.ts';

/** Calls on the native shell, refused where there is none. */
export function shellCalls({
  options,
  tokens,
}: Parts): Some<'chooseFile' | 'choosePlace' | 'chooseFolder' | 'menuState'> {
  const shell = () => {
    if (options.shell) return options.shell;
    throw new Refusal('bad_argument', 'There are no native dialogs here.');
  };
  return {
    chooseFile: async ({ purpose }) => {
      const path = await shell().chooseFile(purpose);
      return path === null ? null : tokens.add(path, 'read');
    },
    choosePlace: async ({ suggestedName }) => {
      const path = await shell().choosePlace(suggestedName);
      return path === null ? null : tokens.add(path, 'write');
    },
    chooseFolder: async () => {
      const path = await shell().chooseFolder();
      return path === null ? null : tokens.add(path, 'folder');
    },
    menuState: (menu) => {
      options.shell?.menuState(menu);
      return {};
    },
  };
}
