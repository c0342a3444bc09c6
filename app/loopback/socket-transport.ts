import type { WebSocket } from 'ws';
import { decodeFrame, encodeFrame, type Transport } from '../contract.ts';

/** A window that leaves this much unread isn't reading any more. */
const MOST_UNREAD_BYTES = 512 * 1024 * 1024;

/** The host's end of a WebSocket. A frame that can't be unpacked closes it. */
export function socketTransport(socket: WebSocket): Transport {
  const waiting: unknown[] = [];
  let listener: ((message: unknown) => void) | null = null;
  socket.binaryType = 'nodebuffer';
  socket.on('message', (data: Buffer, isBinary) => {
    let message: unknown;
    try {
      if (!isBinary) throw new TypeError('text frame');
      message = decodeFrame(data);
    } catch {
      socket.close(1003, 'not a frame of the contract');
      return;
    }
    if (listener) listener(message);
    else waiting.push(message);
  });
  socket.on('error', () => socket.terminate());
  return {
    send(message) {
      if (socket.readyState !== socket.OPEN) return;
      if (socket.bufferedAmount > MOST_UNREAD_BYTES) socket.terminate();
      else socket.send(encodeFrame(message));
    },
    onMessage(next) {
      listener = next;
      for (const message of waiting.splice(0)) next(message);
    },
    onClose: (next) => void socket.once('close', next),
    close: () => socket.close(1000),
  };
}
