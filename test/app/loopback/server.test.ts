import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { request } from 'node:http';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import { decodeFrame, encodeFrame, type Transport } from '../../../app/contract.ts';
import { Downloads } from '../../../app/host/downloads.ts';
import { type LoopbackServer, serveLoopback } from '../../../app/loopback/server.ts';

interface Reply {
  readonly status: number;
  readonly headers: Record<string, string | string[] | undefined>;
  readonly body: string;
}

let server: LoopbackServer;
let folder: string;
let transports: Transport[];
let downloads: Downloads;
let arrived: string[];

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'needlebeat-loopback-'));
  transports = [];
  arrived = [];
  downloads = new Downloads();
  server = await serveLoopback({
    page: new Map([
      ['/', { bytes: Buffer.from('<!doctype html>'), type: 'text/html; charset=utf-8' }],
      ['/assets/a.js', { bytes: Buffer.from('1'), type: 'text/javascript; charset=utf-8' }],
    ]),
    connect: (transport) => transports.push(transport),
    uploads: {
      folder,
      arrived: (path, name) => {
        arrived.push(path);
        return { token: 'T', name };
      },
    },
    takeDownload: (address) => downloads.take(address),
    largestUpload_bytes: 1000,
  });
});
afterEach(async () => {
  await server.close();
  await rm(folder, { recursive: true });
});

/** A request with exactly these headers and exactly this path: fetch would tidy both up. */
function ask(path: string, headers: Record<string, string> = {}, method = 'GET', body?: string): Promise<Reply> {
  const { port } = new URL(server.origin);
  return new Promise((resolve, reject) => {
    const sent = request({ host: '127.0.0.1', port, path, method, headers, setHost: !('Host' in headers) }, (reply) => {
      let text = '';
      reply.on('data', (chunk) => {
        text += String(chunk);
      });
      reply.on('end', () => resolve({ status: reply.statusCode ?? 0, headers: reply.headers, body: text }));
    });
    sent.on('error', reject);
    sent.end(body);
  });
}

async function enter(): Promise<string> {
  const reply = await ask(new URL(server.newAddress()).pathname + new URL(server.newAddress()).search);
  return String(reply.headers['set-cookie']).split(';')[0] ?? '';
}

function upgrade(headers: Record<string, string>, path = '/link'): Promise<number | 'open'> {
  return new Promise((resolve) => {
    const socket = new WebSocket(`${server.origin.replace('http', 'ws')}${path}`, { headers });
    socket.on('open', () => {
      socket.close();
      resolve('open');
    });
    socket.on('unexpected-response', (_request, response) => {
      resolve(response.statusCode ?? 0);
      socket.terminate();
    });
    socket.on('error', () => resolve(0));
  });
}

describe('who is let in', () => {
  it('listens on 127.0.0.1 alone', () => {
    expect(server.origin).toMatch(/^http:\/\/127\.0\.0\.1:\d+$/);
  });

  it('answers nothing without the cookie', async () => {
    for (const path of ['/', '/assets/a.js', '/upload', '/download/x']) expect((await ask(path)).status).toBe(403);
  });

  it('takes a secret once and exchanges it for a cookie that scripts and other sites never see', async () => {
    const { pathname, search } = new URL(server.newAddress());
    const first = await ask(pathname + search);
    expect(first.status).toBe(303);
    expect(first.headers.location).toBe('/');
    const cookie = String(first.headers['set-cookie']);
    expect(cookie).toContain('HttpOnly');
    expect(cookie).toContain('SameSite=Strict');
    expect((await ask(pathname + search)).status).toBe(403);
    expect((await ask('/enter?secret=')).status).toBe(403);
    expect((await ask('/', { Cookie: cookie.split(';')[0] ?? '' })).status).toBe(200);
    expect((await ask('/', { Cookie: `${cookie.split('=')[0]}=guess` })).status).toBe(403);
  });

  it('lets a browser that is in already in again by its used address', async () => {
    const { pathname, search } = new URL(server.newAddress());
    const cookie = String((await ask(pathname + search)).headers['set-cookie']).split(';')[0] ?? '';
    const again = await ask(pathname + search, { Cookie: cookie });
    expect(again.status).toBe(303);
  });

  it('refuses another Host, also one that resolves to this machine', async () => {
    const cookie = await enter();
    const { port } = new URL(server.origin);
    for (const host of ['evil.example', `evil.example:${port}`, '127.0.0.1', `localhost:${port}`, '127.0.0.1:1']) {
      expect((await ask('/', { Host: host, Cookie: cookie })).status, host).toBe(403);
    }
  });

  it('refuses another Origin, and a missing one where something is changed', async () => {
    const Cookie = await enter();
    expect((await ask('/', { Cookie, Origin: 'http://evil.example' })).status).toBe(403);
    expect((await ask('/', { Cookie, Origin: 'null' })).status).toBe(403);
    expect((await ask('/', { Cookie, 'Sec-Fetch-Site': 'cross-site' })).status).toBe(403);
    expect((await ask('/upload', { Cookie, 'X-File-Name': 'a' }, 'POST', 'x')).status).toBe(403);
    expect(arrived).toEqual([]);
  });

  it('checks Host, Origin, cookie and path of the socket too', async () => {
    const Cookie = await enter();
    const Origin = server.origin;
    expect(await upgrade({ Cookie })).toBe(403);
    expect(await upgrade({ Cookie, Origin: 'http://evil.example' })).toBe(403);
    expect(await upgrade({ Origin })).toBe(403);
    expect(await upgrade({ Cookie, Origin, Host: 'evil.example' })).toBe(403);
    expect(await upgrade({ Cookie, Origin }, '/other')).toBe(404);
    expect(transports).toEqual([]);
    expect(await upgrade({ Cookie, Origin })).toBe('open');
    expect(transports).toHaveLength(1);
  });
});

describe('what is answered', () => {
  it('has the security headers on everything', async () => {
    const Cookie = await enter();
    for (const reply of [await ask('/', { Cookie }), await ask('/nothing', { Cookie }), await ask('/')]) {
      const policy = String(reply.headers['content-security-policy']);
      expect(policy).toContain("default-src 'none'");
      expect(policy).toContain("script-src 'self'");
      expect(policy).not.toMatch(/unsafe|\*|http/);
      for (const part of ["base-uri 'none'", "form-action 'none'", "frame-ancestors 'none'"]) {
        expect(policy).toContain(part);
      }
      expect(reply.headers['x-content-type-options']).toBe('nosniff');
      expect(reply.headers['access-control-allow-origin']).toBeUndefined();
    }
  });

  it('knows its table of files and nothing else', async () => {
    const Cookie = await enter();
    expect((await ask('/assets/a.js', { Cookie })).body).toBe('1');
    const strange = ['/assets', '/assets/', '/../package.json', '/%2e%2e/package.json', '/assets/../../package.json'];
    for (const path of [...strange, '/..\\package.json', '//', '/constructor', '/download/', '/download/x']) {
      const reply = await ask(path, { Cookie });
      expect(reply.status, path).toBe(404);
      expect(reply.body).toBe('There is nothing here.\n');
    }
  });

  it('answers no other method', async () => {
    const Cookie = await enter();
    const Origin = server.origin;
    for (const method of ['PUT', 'DELETE', 'OPTIONS', 'PATCH', 'POST']) {
      expect((await ask('/', { Cookie, Origin }, method)).status, method).toBe(405);
    }
    expect((await ask('/upload', { Cookie, Origin })).status).toBe(405);
    const head = await ask('/', { Cookie }, 'HEAD');
    expect([head.status, head.body]).toEqual([200, '']);
  });

  it('hands a download over once, under its name', async () => {
    const Cookie = await enter();
    const address = downloads.offer({ name: 'résumé "1".csv', type: 'text/csv', bytes: Buffer.from('a,b') });
    const reply = await ask(address, { Cookie });
    expect(reply.body).toBe('a,b');
    expect(reply.headers['content-disposition']).toBe(
      'attachment; filename="r_sum_ _1_.csv"; filename*=UTF-8\'\'r%C3%A9sum%C3%A9%20%221%22.csv',
    );
    expect((await ask(address, { Cookie })).status).toBe(404);
  });
});

describe('a page to print', () => {
  it('is shown once, without scripts and without reaching anything', async () => {
    const Cookie = await enter();
    const page = { name: 'report.html', type: 'text/html; charset=utf-8', bytes: Buffer.from('<!doctype html>') };
    const address = downloads.offer(page, 'print');
    expect((await ask(address)).status).toBe(403);
    const reply = await ask(address, { Cookie });
    expect([reply.status, reply.body]).toEqual([200, '<!doctype html>']);
    expect(reply.headers['content-disposition']).toBeUndefined();
    const policy = String(reply.headers['content-security-policy']);
    expect(policy).toContain("default-src 'none'");
    expect(policy).not.toMatch(/script-src|connect-src|http/);
    expect((await ask(address, { Cookie })).status).toBe(404);
  });
});

describe('uploads', () => {
  const send = async (name: string, body: string, extra: Record<string, string> = {}) =>
    ask('/upload', { Cookie: await enter(), Origin: server.origin, 'X-File-Name': name, ...extra }, 'POST', body);

  it('arrive whole under a name that can do no harm', async () => {
    for (const [name, kept] of [
      ['swing.mp4', 'swing.mp4'],
      [encodeURIComponent('../../etc/pass wd'), 'pass wd'],
      [encodeURIComponent('C:\\temp\\a<b>.mov'), 'a_b_.mov'],
      [encodeURIComponent('..hidden'), 'hidden'],
      ['partial', '_partial'],
    ] as const) {
      const reply = await send(name, `content of ${name}`);
      expect(reply.status).toBe(201);
      expect(JSON.parse(reply.body)).toEqual({ token: 'T', name: kept });
      const path = arrived.at(-1) ?? '';
      expect(path.startsWith(folder)).toBe(true);
      expect(await readFile(path, 'utf8')).toBe(`content of ${name}`);
    }
  });

  it('are refused without a usable name', async () => {
    for (const name of ['', '%', '..', encodeURIComponent('/')]) expect((await send(name, 'x')).status).toBe(400);
  });

  it('are bounded, whether they say their length or not, and leave nothing behind', async () => {
    const stated = await send('big.mp4', 'x'.repeat(1001));
    expect(stated.status).toBe(413);
    expect(JSON.parse(stated.body).message).toContain('big.mp4');
    const streamed = await send('big.mp4', 'x'.repeat(5000), { 'Transfer-Encoding': 'chunked' });
    expect(streamed.status).toBe(413);
    expect(await readdir(folder)).toEqual([]);
    expect(arrived).toEqual([]);
  });

  it('that are cut short leave nothing behind', async () => {
    const Cookie = await enter();
    const { port } = new URL(server.origin);
    const socket = connect(Number(port), '127.0.0.1');
    const head = ['POST /upload HTTP/1.1', `Host: 127.0.0.1:${port}`, `Origin: ${server.origin}`, `Cookie: ${Cookie}`];
    socket.write([...head, 'X-File-Name: cut.mp4', 'Content-Length: 500', '', 'only this'].join('\r\n'));
    await expect.poll(async () => (await readdir(folder)).length).toBe(1);
    socket.destroy();
    await expect.poll(async () => (await readdir(folder)).length).toBe(0);
    expect(arrived).toEqual([]);
  });
});

describe('the socket', () => {
  it('carries frames both ways and closes on anything else', async () => {
    const Cookie = await enter();
    const socket = new WebSocket(`${server.origin.replace('http', 'ws')}/link`, {
      headers: { Cookie, Origin: server.origin },
    });
    await new Promise((resolve) => socket.once('open', resolve));
    const heard: unknown[] = [];
    transports[0]?.onMessage((message) => heard.push(message));
    socket.send(encodeFrame({ kind: 'call', id: 1, name: 'x', args: new Float64Array([2.5]) }));
    await expect.poll(() => heard.length).toBe(1);
    expect(heard[0]).toEqual({ kind: 'call', id: 1, name: 'x', args: new Float64Array([2.5]) });
    const answer = new Promise<Buffer>((resolve) => socket.once('message', (data) => resolve(data as Buffer)));
    transports[0]?.send({ kind: 'event', name: 'y', value: new Uint8Array([1]) });
    expect(decodeFrame(new Uint8Array(await answer))).toEqual({ kind: 'event', name: 'y', value: new Uint8Array([1]) });
    let gone = false;
    transports[0]?.onClose(() => {
      gone = true;
    });
    const code = new Promise((resolve) => socket.once('close', resolve));
    socket.send('a text');
    expect(await code).toBe(1003);
    await expect.poll(() => gone).toBe(true);
  });

  it('is closed with the server', async () => {
    const Cookie = await enter();
    const headers = { Cookie, Origin: server.origin };
    const socket = new WebSocket(`${server.origin.replace('http', 'ws')}/link`, { headers });
    await new Promise((resolve) => socket.once('open', resolve));
    const closed = new Promise((resolve) => socket.once('close', resolve));
    await server.close();
    await closed;
    await expect(ask('/')).rejects.toThrow();
  });
});
