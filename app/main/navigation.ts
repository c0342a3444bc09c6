import { app, type Session } from 'electron';
import { pageAddress } from '../contract/shell-channels.ts';

/** The window stays on its page: no navigation, no frame, no other window, no webview, from whatever page. */
export function denyEverywhere(): void {
  app.on('web-contents-created', (_event, contents) => {
    contents.setWindowOpenHandler(() => ({ action: 'deny' }));
    contents.on('will-navigate', (event) => {
      // Loading the same page again is no way out.
      if (event.url !== pageAddress) event.preventDefault();
    });
    contents.on('will-redirect', (event) => event.preventDefault());
    contents.on('will-frame-navigate', (event) => {
      if (!event.isMainFrame || event.url !== pageAddress) event.preventDefault();
    });
    contents.on('will-attach-webview', (event) => event.preventDefault());
  });
}

/** The page needs no permission of any kind but to write to the clipboard when the user copies the table. */
export function denyPermissions(session: Session): void {
  const granted = (permission: string): boolean => permission === 'clipboard-sanitized-write';
  session.setPermissionRequestHandler((_contents, permission, answer) => answer(granted(permission)));
  session.setPermissionCheckHandler((_contents, permission) => granted(permission));
  session.setDevicePermissionHandler(() => false);
}
