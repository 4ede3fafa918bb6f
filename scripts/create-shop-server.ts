import fs from 'node:fs';
import http from 'node:http';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import sirv from 'sirv';

type Handler = (request: http.IncomingMessage, response: http.ServerResponse) => unknown;
type StaticHeaders = { pathname: string; headers: { key: string; value: string }[] }[];

export interface ShopServerOptions {
  publicOrigin?: string | undefined;
  trustProxy: boolean;
}

const everyResponse = {
  'X-Content-Type-Options': 'nosniff',
  'Referrer-Policy': 'strict-origin-when-cross-origin',
  'Permissions-Policy': 'camera=(self), serial=(self), geolocation=(), microphone=()',
  'Cross-Origin-Opener-Policy': 'same-origin',
};
const closedPolicy =
  "default-src 'self'; base-uri 'none'; object-src 'none'; form-action 'self'; frame-ancestors 'none'";
const forwarded = ['forwarded', 'x-forwarded-for', 'x-forwarded-host', 'x-forwarded-proto', 'x-forwarded-port'];

/** The built shop behind Node's own server: files with compression and policies, all else to Astro's handler. */
export async function createShopServer(dist: string, options: ShopServerOptions): Promise<http.Server> {
  const entry = pathToFileURL(path.join(dist, 'server/entry.mjs')).href;
  const { handler } = (await import(entry)) as { handler: Handler };
  const files = serveFiles(dist);
  return http.createServer((request, response) => {
    for (const [name, value] of Object.entries(everyResponse)) response.setHeader(name, value);
    if (!settleOrigin(request, response, options)) return;
    const canonical = findCanonicalAddress(request.url ?? '/');
    if (canonical !== undefined) {
      response.writeHead(301, { Location: canonical }).end();
      return;
    }
    const render = () => {
      response.setHeader('Content-Security-Policy', closedPolicy);
      void handler(request, response);
    };
    if (request.method === 'GET' || request.method === 'HEAD') files(request, response, render);
    else render();
  });
}

/** Every prerendered page carries the policy of its own scripts and styles, as the adapter wrote it. */
function serveFiles(dist: string) {
  const policies = readPolicies(path.join(dist, '_experimentalHeaders.json'));
  return sirv(path.join(dist, 'client'), {
    brotli: true,
    gzip: true,
    etag: true,
    setHeaders(response, pathname) {
      const immutable = pathname.startsWith('/_astro/');
      response.setHeader('Cache-Control', immutable ? 'public, max-age=31536000, immutable' : 'no-cache');
      response.setHeader('Content-Security-Policy', policies.get(pathname) ?? closedPolicy);
    },
  });
}

function readPolicies(file: string): Map<string, string> {
  const pages = JSON.parse(fs.readFileSync(file, 'utf8')) as StaticHeaders;
  const policies = new Map<string, string>();
  for (const { pathname, headers } of pages) {
    const policy = headers.find(({ key }) => key.toLowerCase() === 'content-security-policy');
    if (policy) policies.set(pathname, policy.value);
  }
  return policies;
}

/**
 * Makes Host and the protocol those of PUBLIC_ORIGIN; without one, only loopback names are answered, so that a foreign
 * name that resolves to this machine gets nothing. False when the response is already sent.
 */
function settleOrigin(
  request: http.IncomingMessage,
  response: http.ServerResponse,
  options: ShopServerOptions,
): boolean {
  if (!options.trustProxy) for (const name of forwarded) delete request.headers[name];
  if (options.publicOrigin !== undefined) {
    const { host, protocol } = new URL(options.publicOrigin);
    request.headers.host = host;
    request.headers['x-forwarded-proto'] = protocol.slice(0, -1);
    delete request.headers['x-forwarded-host'];
    if (protocol === 'https:') response.setHeader('Strict-Transport-Security', 'max-age=31536000');
    return true;
  }
  if (options.trustProxy || /^(127\.0\.0\.1|localhost|\[::1\])(:\d+)?$/.test(request.headers.host ?? '')) return true;
  response
    .writeHead(421, { 'Content-Type': 'text/plain; charset=utf-8' })
    .end('Set PUBLIC_ORIGIN to serve this name.\n');
  return false;
}

/** No trailing slash, and /B/CODE (a label typed or scanned in capitals) is /b/CODE. */
function findCanonicalAddress(url: string): string | undefined {
  const mark = url.indexOf('?');
  const query = mark < 0 ? '' : url.slice(mark);
  const given = mark < 0 ? url : url.slice(0, mark);
  const trimmed = `/${given.replace(/^\/+|\/+$/g, '')}`;
  const wanted = given.length > 1 && given.endsWith('/') ? trimmed : given;
  const address = wanted.replace(/^\/B\//, '/b/');
  return address === given ? undefined : address + query;
}
