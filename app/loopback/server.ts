import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Duplex } from 'node:stream';
import { WebSocketServer } from 'ws';
import type { FileToken, Transport } from '../contract.ts';
import type { Download } from '../host/downloads.ts';
import type { PageFiles } from '../page/page-files.ts';
import { reportHeaders, securityHeaders } from '../page/security-headers.ts';
import { Gate, type Refusal } from './gate.ts';
import { socketTransport } from './socket-transport.ts';
import { receiveUpload, UploadRefused } from './upload.ts';

/** What the server offers, all of it made elsewhere. */
export interface LoopbackOptions {
  readonly page: PageFiles;
  /** Takes over each window that connects. */
  readonly connect: (transport: Transport) => void;
  /** Private folder that uploads are streamed into, and the token for one that has arrived. */
  readonly uploads: { readonly folder: string; readonly arrived: (path: string, name: string) => FileToken };
  /** Hands over what waits under a one-time address; null: nothing does. */
  readonly takeDownload: (address: string) => Download | null;
  /** Largest upload taken; 64 GiB when left out. */
  readonly largestUpload_bytes?: number;
}

/** The server on 127.0.0.1. */
export interface LoopbackServer {
  readonly origin: string;
  /** A new address that lets one browser in, once. */
  newAddress(): string;
  close(): Promise<void>;
  [Symbol.asyncDispose](): Promise<void>;
}

const LARGEST_MESSAGE_BYTES = 80 * 1024 * 1024;
const LARGEST_UPLOAD_BYTES = 64 * 2 ** 30;
const headers = securityHeaders("'self'");

/** Serves the window on a random port of 127.0.0.1: its files, the socket, uploads, one-time downloads, and nothing else. */
export async function serveLoopback(options: LoopbackOptions): Promise<LoopbackServer> {
  const server = createServer({ requestTimeout: 3_600_000, headersTimeout: 20_000, maxHeaderSize: 16_384 });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  const gate = new Gate((server.address() as AddressInfo).port);
  const sockets = new WebSocketServer({ noServer: true, maxPayload: LARGEST_MESSAGE_BYTES, perMessageDeflate: false });

  server.on('request', (request, response) => {
    answer(request, response, gate, options).catch(() => {
      if (!response.headersSent) say(response, 500, 'Something went wrong here.');
      else response.destroy();
    });
  });
  server.on('upgrade', (request, socket, head) => {
    socket.on('error', () => socket.destroy());
    const refusal = gate.stranger(request, true) ?? (gate.admitted(request) ? null : 'no_cookie');
    if (refusal) return refuseUpgrade(socket, 403);
    if (request.url !== '/link') return refuseUpgrade(socket, 404);
    sockets.handleUpgrade(request, socket, head, (webSocket) => options.connect(socketTransport(webSocket)));
  });

  let closing: Promise<void> | null = null;
  const close = () => {
    closing ??= new Promise((resolve) => {
      for (const socket of sockets.clients) socket.terminate();
      sockets.close();
      server.close(() => resolve());
      server.closeAllConnections();
    });
    return closing;
  };
  return { origin: gate.origin, newAddress: () => gate.newAddress(), close, [Symbol.asyncDispose]: close };
}

async function answer(
  request: IncomingMessage,
  response: ServerResponse,
  gate: Gate,
  options: LoopbackOptions,
): Promise<void> {
  const method = request.method ?? '';
  const reads = method === 'GET' || method === 'HEAD';
  const stranger = gate.stranger(request, !reads);
  if (stranger) return refuse(response, stranger);
  const [path = '', query = ''] = splitOnce(request.url ?? '', '?');
  if (path === '/enter' && method === 'GET') return enter(request, response, gate, new URLSearchParams(query));
  if (!gate.admitted(request)) return refuse(response, 'no_cookie');
  if (path === '/upload') {
    if (method !== 'POST') return say(response, 405, 'Only POST is answered here.', { Allow: 'POST' });
    return upload(request, response, options);
  }
  if (!reads) return say(response, 405, 'Only GET and HEAD are answered here.', { Allow: 'GET, HEAD' });
  const file = options.page.get(path);
  if (file) return send(response, method, { 'Content-Type': file.type }, file.bytes);
  const toShow = path.startsWith('/print/');
  const waits = (toShow || path.startsWith('/download/')) && method === 'GET';
  const download = waits ? options.takeDownload(path) : null;
  if (!download) return say(response, 404, 'There is nothing here.');
  const way = toShow ? reportHeaders() : asAttachment(download.name);
  send(response, method, { ...way, 'Content-Type': download.type }, download.bytes);
}

function enter(request: IncomingMessage, response: ServerResponse, gate: Gate, query: URLSearchParams): void {
  const cookie = gate.enter(query.get('secret') ?? '');
  if (cookie === null && !gate.admitted(request)) refuse(response, 'wrong_secret');
  else response.writeHead(303, { ...headers, Location: '/', ...(cookie !== null && { 'Set-Cookie': cookie }) }).end();
}

async function upload(request: IncomingMessage, response: ServerResponse, options: LoopbackOptions): Promise<void> {
  const { uploads, largestUpload_bytes = LARGEST_UPLOAD_BYTES } = options;
  try {
    const { path, name } = await receiveUpload(request, uploads.folder, largestUpload_bytes);
    const body = JSON.stringify(uploads.arrived(path, name));
    send(response, 'POST', { 'Content-Type': 'application/json' }, Buffer.from(body), 201);
  } catch (error) {
    if (!(error instanceof UploadRefused)) throw error;
    const body = JSON.stringify({ reason: 'bad_input', message: error.message });
    // The rest of the body isn't wanted: the connection ends with this answer.
    const extra = { 'Content-Type': 'application/json', Connection: 'close' };
    send(response, 'POST', extra, Buffer.from(body), error.status);
  }
}

const sentences: Readonly<Record<Refusal, string>> = {
  wrong_host: 'This address is not answered.',
  wrong_origin: 'Requests from other pages are not answered.',
  no_cookie: 'Open Needlebeat through the address that it printed.',
  wrong_secret: 'This address has been used already, or never was one: start Needlebeat again for a new one.',
};

function refuse(response: ServerResponse, refusal: Refusal): void {
  say(response, 403, sentences[refusal]);
}

function refuseUpgrade(socket: Duplex, status: 403 | 404): void {
  socket.end(`HTTP/1.1 ${status} ${status === 403 ? 'Forbidden' : 'Not Found'}\r\nConnection: close\r\n\r\n`);
}

function say(response: ServerResponse, status: number, sentence: string, extra: Record<string, string> = {}): void {
  const plain = { 'Content-Type': 'text/plain; charset=utf-8', Connection: 'close', ...extra };
  send(response, 'GET', plain, Buffer.from(`${sentence}\n`), status);
}

function send(
  response: ServerResponse,
  method: string,
  extra: Record<string, string>,
  bytes: Uint8Array,
  status = 200,
): void {
  response.writeHead(status, { ...headers, ...extra, 'Content-Length': bytes.byteLength });
  response.end(method === 'HEAD' ? undefined : bytes);
}

/** RFC 6266: a plain fallback, and the name itself encoded as RFC 8187 has it. */
function asAttachment(name: string): Record<string, string> {
  const fallback = name.replace(/[^\w. -]/g, '_');
  const encoded = encodeURIComponent(name).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);
  return { 'Content-Disposition': `attachment; filename="${fallback}"; filename*=UTF-8''${encoded}` };
}

function splitOnce(text: string, mark: string): [string, string] {
  const at = text.indexOf(mark);
  return at < 0 ? [text, ''] : [text.slice(0, at), text.slice(at + 1)];
}
