import { programVersion } from '../../src/report/program.ts';
import { CONTRACT_VERSION } from '../contract.ts';
import { aboutFacts, cautions } from './about.ts';
import type { Parts, Some } from './parts.ts';
import { Refusal } from './serve-window.ts';

/** Calls about the program itself and the session that is open. */
export function documentCalls({
  options,
  keeper,
  saving,
  layout,
}: Parts): Some<
  | 'hello'
  | 'about'
  | 'layout'
  | 'keepLayout'
  | 'getDocument'
  | 'openFile'
  | 'openDemo'
  | 'recentSessions'
  | 'openRecent'
  | 'closeDocument'
  | 'locateRecording'
  | 'edit'
  | 'undo'
  | 'redo'
> {
  const revision = () => ({ revision: keeper.revision });
  return {
    hello: ({ contract }) => {
      if (contract !== CONTRACT_VERSION) {
        throw new Refusal('bad_argument', 'The window is of another version of the program: load it again.');
      }
      const { shell, browser } = options;
      const program = { program: 'Needlebeat', version: programVersion };
      return { contract: CONTRACT_VERSION, ...program, dialogs: shell !== null, uploads: browser, cautions };
    },
    about: () => aboutFacts(options.env, options.runtime),
    layout: () => layout.read(),
    keepLayout: async ({ layout: next }) => {
      await layout.keep(next);
      return {};
    },
    getDocument: () => keeper.state(),
    openFile: async ({ token, add }) => ({
      opened: await keeper.openPath(saving.placeOf(token, 'read'), add ?? false),
    }),
    openDemo: async () => {
      await keeper.openTemplate(options.demo);
      return { opened: 'session' };
    },
    recentSessions: () => keeper.recentSessions(),
    openRecent: async ({ id }) => {
      await keeper.openRecent(id);
      return { opened: 'session' };
    },
    closeDocument: async () => {
      await keeper.begin(null);
      return {};
    },
    locateRecording: async ({ recording, token, evenIfDifferent }) => ({
      recognised: await keeper.locate(recording, saving.placeOf(token, 'read'), evenIfDifferent ?? false),
    }),
    edit: async ({ session, base, label, merge }) => {
      await keeper.edit(session, base, label, merge ?? null);
      return revision();
    },
    undo: async () => {
      await keeper.undo();
      return revision();
    },
    redo: async () => {
      await keeper.redo();
      return revision();
    },
  };
}
