import type { IpcMainEvent, IpcMainInvokeEvent, WebContents } from 'electron';
import { pageOrigin } from '../contract/shell-channels.ts';

/** Whether a message comes from the main frame of our window, showing our page. */
export function isOurPage(event: IpcMainEvent | IpcMainInvokeEvent, window: WebContents | null): boolean {
  const { senderFrame } = event;
  if (!senderFrame || !window || event.sender !== window || senderFrame !== window.mainFrame) return false;
  try {
    const { protocol, host } = new URL(senderFrame.url);
    return `${protocol}//${host}` === pageOrigin;
  } catch {
    return false;
  }
}
