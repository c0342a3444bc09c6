import type { IpcRenderer, WebUtils } from 'electron';
import { shellChannels } from '../contract/shell-channels.ts';
import type { FileToken, HostMessage, WindowMessage } from '../contract.ts';

/** What the page gets: a transport to the host, and the token of a file that was dropped on it. */
export interface Bridge {
  send(message: WindowMessage): void;
  onMessage(listener: (message: HostMessage) => void): void;
  onClose(listener: () => void): void;
  close(): void;
  tokenOf(file: File): Promise<FileToken>;
}

/** The part of Electron that the preload script uses. */
export interface BridgeParts {
  readonly ipc: Pick<IpcRenderer, 'once' | 'send' | 'invoke'>;
  readonly webUtils: Pick<WebUtils, 'getPathForFile'>;
}

/** Makes the bridge and asks the shell for the port. What is sent before the port is there waits. */
export function makeBridge({ ipc, webUtils }: BridgeParts): Bridge {
  const waiting: WindowMessage[] = [];
  const early: HostMessage[] = [];
  const closers: (() => void)[] = [];
  let listener: ((message: HostMessage) => void) | null = null;
  let port: MessagePort | null = null;
  let closed = false;

  const end = () => {
    if (closed) return;
    closed = true;
    for (const closer of closers) closer();
  };
  ipc.once(shellChannels.port, (event) => {
    port = event.ports[0] ?? null;
    if (!port || closed) return end();
    port.onmessage = ({ data }) => (listener ? listener(data as HostMessage) : early.push(data as HostMessage));
    port.addEventListener('close', end);
    for (const message of waiting.splice(0)) port.postMessage(message);
  });
  ipc.send(shellChannels.port);

  return {
    send(message) {
      if (closed) return;
      if (port) port.postMessage(message);
      else waiting.push(message);
    },
    onMessage(next) {
      listener = next;
      for (const message of early.splice(0)) next(message);
    },
    onClose: (next) => void closers.push(next),
    close() {
      port?.close();
      end();
    },
    tokenOf: (file) => ipc.invoke(shellChannels.droppedFile, webUtils.getPathForFile(file)) as Promise<FileToken>,
  };
}
