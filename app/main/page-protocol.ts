import { protocol, type Session } from 'electron';
import { pageOrigin } from '../contract/shell-channels.ts';
import type { PageFiles } from '../page/page-files.ts';
import { securityHeaders } from '../page/security-headers.ts';

const headers = securityHeaders("'none'");

/** Makes `app:` a scheme with an origin of its own, as https has. Before Electron is ready. */
export function registerPageScheme(): void {
  protocol.registerSchemesAsPrivileged([{ scheme: 'app', privileges: { standard: true, secure: true } }]);
}

/** Serves the window's files, from their table alone, to one session. */
export function servePage(session: Session, files: PageFiles): void {
  session.protocol.handle('app', (request) => answer(request, files));
}

/** The answer to a request of the page. */
export function answer(request: Request, files: PageFiles): Response {
  const url = new URL(request.url);
  const ours = `${url.protocol}//${url.host}` === pageOrigin;
  const file = ours && request.method === 'GET' ? files.get(url.pathname) : undefined;
  if (!file) return new Response('There is nothing here.', { status: 404, headers: { ...headers } });
  return new Response(new Uint8Array(file.bytes), { headers: { ...headers, 'Content-Type': file.type } });
}
