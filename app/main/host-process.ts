import { InputError } from '../../src/recording/input-error.ts';
import { bareSentence } from '../host/bare-sentence.ts';
import { type Host, startHost } from '../host/host.ts';
import { hostError } from '../host/serve-window.ts';
import type { Shell } from '../host/shell.ts';
import type { DialogWish, FromHost, HostStart, ToHost } from './host-messages.ts';
import { type Port, portTransport } from './port-transport.ts';

/* The host in a process of its own (Electron's utility process): however hard it works, window and menu stay alive. */

/** What is used of the port to the shell. */
export interface ParentPort {
  postMessage(message: FromHost): void;
  on(event: 'message', listener: (event: { data: unknown; ports: Port[] }) => void): unknown;
}

/** Serves the shell that started this process. @param exit ends the process. */
export function serveShell(parent: ParentPort, exit: (code: number) => void): void {
  const tell = (message: FromHost) => parent.postMessage(message);
  const asked = new Map<number, (path: string | null) => void>();
  const printing = new Map<number, (pdf: Uint8Array | null) => void>();
  const early: Port[] = [];
  let nextDialog = 1;
  let host: Host | null = null;

  const ask = (wish: DialogWish) =>
    new Promise<string | null>((resolve) => {
      const number = nextDialog++;
      asked.set(number, resolve);
      tell({ kind: 'dialog', number, wish });
    });
  const shell: Shell = {
    chooseFile: (purpose) => ask({ dialog: 'file', purpose }),
    choosePlace: (suggestedName) => ask({ dialog: 'place', suggestedName }),
    chooseFolder: () => ask({ dialog: 'folder' }),
    printPdf: async (html) => {
      const number = nextDialog++;
      const pdf = await new Promise<Uint8Array | null>((resolve) => {
        printing.set(number, resolve);
        tell({ kind: 'print', number, html });
      });
      if (pdf === null) throw new InputError('The report could not be printed to a PDF.');
      return pdf;
    },
    menuState: (facts) => tell({ kind: 'menu', facts }),
    documentChanged: (facts) => tell({ kind: 'document', facts }),
  };

  const start = async (message: HostStart) => {
    const { kind: _, file, ...given } = message;
    const report = (error: unknown) =>
      void process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
    const options = { ...given, env: process.env, shell, browser: false, report };
    let problem: string | null = null;
    try {
      host = await startHost(options, file);
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      problem = bareSentence(error.message);
      host = await startHost(options, null);
    }
    for (const port of early.splice(0)) host.connect(portTransport(port));
    tell({ kind: 'document', facts: host.unsaved() });
    tell({ kind: 'started', problem });
  };
  const reply = async (number: number, work: () => Promise<void> | void) => {
    let problem: string | null = null;
    try {
      await work();
    } catch (error) {
      problem = hostError(error).message;
    }
    tell({ kind: 'reply', number, token: null, problem });
  };

  parent.on('message', ({ data, ports }) => {
    const message = data as ToHost;
    const [port] = ports;
    switch (message.kind) {
      case 'start':
        start(message).catch((error: unknown) => {
          process.stderr.write(`${error instanceof Error ? error.stack : String(error)}\n`);
          exit(1);
        });
        break;
      case 'window':
        if (port && host) host.connect(portTransport(port));
        else if (port) early.push(port);
        break;
      case 'token': {
        const token = host?.addToken(message.path, 'read') ?? null;
        const problem = token ? null : 'The program is still starting.';
        tell({ kind: 'reply', number: message.number, token, problem });
        break;
      }
      case 'requestOpen':
        host?.requestOpen(message.path);
        break;
      case 'command':
        host?.command(message.id);
        break;
      case 'save':
        void reply(message.number, () => host?.save(message.path));
        break;
      case 'close':
        void reply(message.number, () => host?.close(message.discard)).then(() => setImmediate(() => exit(0)));
        break;
      case 'chosen':
        asked.get(message.number)?.(message.path);
        asked.delete(message.number);
        break;
      case 'printed':
        printing.get(message.number)?.(message.pdf);
        printing.delete(message.number);
        break;
      default:
        message satisfies never;
    }
  });
}
