import http from 'node:http';
import { expect, inject, test } from 'vitest';

const baseUrl = inject('baseUrl');

/** Without following redirects, and with any Host. */
function ask(address: string, headers: Record<string, string> = {}): Promise<http.IncomingMessage> {
  return new Promise((resolve, reject) => {
    http.get(`${baseUrl}${address}`, { headers }, (response) => resolve(response.resume())).once('error', reject);
  });
}

test.each(['/', '/sign-in', '/formulas', '/mix', '/shelf', '/scan', '/shift', '/weigh', '/label', '/b/AA00001'])(
  '%s carries a policy without unsafe scripts, and the other headers of every response',
  async (page) => {
    const { statusCode, headers } = await ask(page);
    expect(statusCode).toBe(200);
    const policy = String(headers['content-security-policy']);
    for (const part of [
      "default-src 'self'",
      "object-src 'none'",
      "base-uri 'none'",
      "frame-ancestors 'none'",
      "script-src 'self'",
    ]) {
      expect(policy).toContain(part);
    }
    expect(policy).not.toMatch(/'unsafe-inline'|'unsafe-eval'/);
    expect(headers).toMatchObject({
      'permissions-policy': 'camera=(self), serial=(self), geolocation=(), microphone=()',
      'referrer-policy': 'strict-origin-when-cross-origin',
      'x-content-type-options': 'nosniff',
    });
  },
);

test('pages and the service worker are asked for again, hashed files never', async () => {
  expect((await ask('/sw.js')).headers['cache-control']).toBe('no-cache');
  expect((await ask('/')).headers['cache-control']).toBe('no-cache');
  const html = await (await fetch(`${baseUrl}/`)).text();
  const hashed = /\/_astro\/[^"')]+/.exec(html)?.[0];
  expect((await ask(hashed ?? '/_astro/missing')).headers['cache-control']).toBe('public, max-age=31536000, immutable');
});

test('pages come compressed', async () => {
  expect((await ask('/', { 'Accept-Encoding': 'br' })).headers['content-encoding']).toBe('br');
  expect((await ask('/', { 'Accept-Encoding': 'gzip' })).headers['content-encoding']).toBe('gzip');
});

test.each([
  ['/B/AA00001', '/b/AA00001'],
  ['/B/AA00001?from=label', '/b/AA00001?from=label'],
  ['/mix/', '/mix'],
  ['//elsewhere.example.test/', '/elsewhere.example.test'],
])('%s moves to %s', async (given, wanted) => {
  const { statusCode, headers } = await ask(given);
  expect(statusCode).toBe(301);
  expect(headers.location).toBe(wanted);
});

test('a foreign name that resolves to this machine gets nothing', async () => {
  expect((await ask('/', { Host: 'elsewhere.example.test' })).statusCode).toBe(421);
  expect((await ask('/', { 'X-Forwarded-Host': 'elsewhere.example.test' })).statusCode).toBe(200);
});
