/*
 * The few messages between the preload script and the desktop shell. Everything else goes over the message port, which leads straight to the host.
 */
export const shellChannels = {
  /** Preload asks for a message port to the host; the shell answers on the same channel with the port. */
  port: 'needlebeat:port',
  /** Preload hands over the path of a file that was dropped on the window; the answer is a FileToken. */
  droppedFile: 'needlebeat:dropped-file',
} as const;

/** Origin of the window in the desktop shell, and its page. */
export const pageOrigin = 'app://needlebeat';
export const pageAddress = `${pageOrigin}/index.html`;
