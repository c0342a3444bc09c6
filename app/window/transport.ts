import {
  decodeFrame,
  encodeFrame,
  type FileToken,
  type HostMessage,
  type Transport,
  type WindowMessage,
} from '../contract.ts';

/** What the desktop shell's preload script puts on the page; absent in a browser. */
export interface ShellBridge extends Transport {
  /** Token of a file that was dropped on the window. */
  tokenOf(file: File): Promise<FileToken>;
}

declare global {
  var needlebeat: ShellBridge | undefined;
}

/** The way to the host: the shell's message port where there is one, else a WebSocket to where the page came from. */
export function openTransport(): Transport {
  return globalThis.needlebeat ?? socketTransport(new WebSocket(`ws://${location.host}/link`));
}

/** Transport over a WebSocket, one message as one binary frame; what is sent before it is open waits. */
export function socketTransport(socket: WebSocket): Transport {
  socket.binaryType = 'arraybuffer';
  const waiting: (WindowMessage | HostMessage)[] = [];
  socket.addEventListener('open', () => {
    for (const message of waiting.splice(0)) socket.send(encodeFrame(message));
  });
  const early: unknown[] = [];
  let listener: ((message: unknown) => void) | null = null;
  socket.addEventListener('message', (event) => {
    const message = decodeFrame(new Uint8Array(event.data as ArrayBuffer));
    if (listener) listener(message);
    else early.push(message);
  });
  return {
    send(message) {
      if (socket.readyState === WebSocket.CONNECTING) waiting.push(message);
      else if (socket.readyState === WebSocket.OPEN) socket.send(encodeFrame(message));
    },
    onMessage(next) {
      listener = next;
      for (const message of early.splice(0)) next(message);
    },
    onClose: (next) => socket.addEventListener('close', () => next(), { once: true }),
    close: () => socket.close(),
  };
}

/** Hands a file that the user dropped or picked to the host. @throws Error with the host's sentence where it is refused. */
export async function tokenOfFile(file: File): Promise<FileToken> {
  if (globalThis.needlebeat) return globalThis.needlebeat.tokenOf(file);
  const answer = await fetch('/upload', {
    method: 'POST',
    body: file,
    headers: { 'X-File-Name': encodeURIComponent(file.name) },
  });
  const value: unknown = await answer.json();
  if (!answer.ok) {
    const said = typeof value === 'object' && value !== null && 'message' in value ? String(value.message) : '';
    throw new Error(said || `${file.name} could not be handed over (${answer.status}).`);
  }
  return value as FileToken;
}
