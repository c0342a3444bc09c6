import { randomBytes } from 'node:crypto';
import { BrowserWindow, session } from 'electron';
import { pageOrigin } from '../contract/shell-channels.ts';
import { reportHeaders } from '../page/security-headers.ts';
import { denyPermissions } from './navigation.ts';

const LARGEST_PAGE = 64 * 1024 * 1024;

/**
 * Prints a page to PDF, in a hidden window that runs no script, reaches nothing and is gone afterwards. The paper's size is the page's own.
 * @throws Error where what came is no page.
 */
export async function printPage(html: unknown): Promise<Uint8Array> {
  if (typeof html !== 'string' || html.length > LARGEST_PAGE || !/^<!doctype html>/i.test(html)) {
    throw new Error('This is not a page to print.');
  }
  const name = randomBytes(12).toString('hex');
  const address = `${pageOrigin}/print/${name}`;
  // In memory only, and for this page alone.
  const pages = session.fromPartition(`print-${name}`);
  denyPermissions(pages);
  pages.protocol.handle('app', ({ url }) =>
    url === address
      ? new Response(html, { headers: { ...reportHeaders(), 'Content-Type': 'text/html; charset=utf-8' } })
      : new Response(null, { status: 404 }),
  );
  const window = new BrowserWindow({
    show: false,
    webPreferences: {
      session: pages,
      javascript: false,
      sandbox: true,
      contextIsolation: true,
      nodeIntegration: false,
      webviewTag: false,
      webSecurity: true,
    },
  });
  try {
    await window.loadURL(address);
    return await window.webContents.printToPDF({ printBackground: true, preferCSSPageSize: true });
  } finally {
    window.destroy();
    pages.protocol.unhandle('app');
  }
}
