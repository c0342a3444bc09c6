import type { MessagePortMain } from 'electron';
import type { Transport } from '../contract.ts';

/** The part of Electron's message port that is used. */
export type Port = Pick<MessagePortMain, 'postMessage' | 'on' | 'once' | 'start' | 'close'>;

/** The host's end of a message port. */
export function portTransport(port: Port): Transport {
  return {
    send: (message) => port.postMessage(message),
    onMessage(listener) {
      port.on('message', (event) => listener(event.data));
      // Messages wait in the port until now.
      port.start();
    },
    onClose: (listener) => void port.once('close', listener),
    close: () => port.close(),
  };
}
