const policy = (connect: string): string =>
  [
    "default-src 'none'",
    "script-src 'self'",
    "style-src 'self'",
    "img-src 'self' blob:",
    "font-src 'self'",
    `connect-src ${connect}`,
    "base-uri 'none'",
    "form-action 'none'",
    "frame-ancestors 'none'",
  ].join('; ');

/** Headers of the report page, which has no script, reaches nothing and carries its style and drawings inside. */
export function reportHeaders(): Readonly<Record<string, string>> {
  const policy = ["default-src 'none'", "style-src 'unsafe-inline'", "base-uri 'none'"];
  return {
    ...securityHeaders("'none'"),
    'Content-Security-Policy': [...policy, "form-action 'none'", "frame-ancestors 'none'"].join('; '),
  };
}

/**
 * Headers of every answer that carries the window.
 * @param connect sources that the page may connect to: `'self'` on loopback, `'none'` in Electron, which has a message port.
 */
export function securityHeaders(connect: "'self'" | "'none'"): Readonly<Record<string, string>> {
  return {
    'Content-Security-Policy': policy(connect),
    'X-Content-Type-Options': 'nosniff',
    'X-Frame-Options': 'DENY',
    'Referrer-Policy': 'no-referrer',
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Cross-Origin-Resource-Policy': 'same-origin',
    'Cross-Origin-Embedder-Policy': 'require-corp',
    'Permissions-Policy': 'camera=(), microphone=(), geolocation=(), usb=(), serial=(), display-capture=()',
    'Cache-Control': 'no-store',
  };
}
