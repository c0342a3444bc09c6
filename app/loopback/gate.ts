import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { IncomingMessage } from 'node:http';

/** Why a request isn't answered. */
export type Refusal = 'wrong_host' | 'wrong_origin' | 'no_cookie' | 'wrong_secret';

/** Who may speak to the server: the browser that opened the address with its secret first, from the server's own page. */
export class Gate {
  readonly #cookie = randomBytes(32).toString('base64url');
  readonly #secrets = new Set<string>();
  readonly #port: number;

  constructor(port: number) {
    this.#port = port;
  }

  get origin(): string {
    return `http://127.0.0.1:${this.#port}`;
  }

  /** A new address that lets one browser in, once. */
  newAddress(): string {
    const secret = randomBytes(24).toString('base64url');
    this.#secrets.add(secret);
    return `${this.origin}/enter?secret=${secret}`;
  }

  /** Host must be ours on every request, so that a name bound to this address from outside gets nothing; Origin too, where it is sent. */
  stranger(request: IncomingMessage, mustSayOrigin: boolean): Refusal | null {
    const { host, origin } = request.headers;
    if (host !== `127.0.0.1:${this.#port}`) return 'wrong_host';
    if (origin === undefined ? mustSayOrigin : origin !== this.origin) return 'wrong_origin';
    const site = request.headers['sec-fetch-site'];
    if (site !== undefined && site !== 'same-origin' && site !== 'none') return 'wrong_origin';
    return null;
  }

  /** Whether the request carries the cookie that the secret was exchanged for. */
  admitted(request: IncomingMessage): boolean {
    const wanted = `${this.#cookieName}=`;
    return (request.headers.cookie ?? '')
      .split(';')
      .map((part) => part.trim())
      .some((part) => part.startsWith(wanted) && same(part.slice(wanted.length), this.#cookie));
  }

  /** Uses a secret up. @returns the Set-Cookie header, null: no such secret, or used before. */
  enter(secret: string): string | null {
    for (const known of this.#secrets) {
      if (!same(known, secret)) continue;
      this.#secrets.delete(known);
      return `${this.#cookieName}=${this.#cookie}; Path=/; HttpOnly; SameSite=Strict`;
    }
    return null;
  }

  /** Cookies don't tell ports apart: the name does. */
  get #cookieName(): string {
    return `needlebeat-${this.#port}`;
  }
}

function same(a: string, b: string): boolean {
  const [x, y] = [Buffer.from(a), Buffer.from(b)];
  return x.length === y.length && timingSafeEqual(x, y);
}
