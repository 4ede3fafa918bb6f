import type { ServerResponse } from 'node:http';
import { createShopServer } from './create-shop-server.ts';
import { distFolder } from './paths.mjs';
import { portError } from './port.mjs';

/** What is under way may take as long as a statement may. */
const graceMilliseconds = 30_000;
/** Longer than a proxy's 60 or 75 s: it must be the proxy that closes an idle connection, or a request is lost between. */
const keepAliveMilliseconds = 80_000;
const port = Number(process.env['PORT'] ?? 4321);
const host = process.env['HOST'] ?? '127.0.0.1';

const server = await createShopServer(distFolder, {
  publicOrigin: process.env['PUBLIC_ORIGIN'] || undefined,
  trustProxy: process.env['TRUST_PROXY'] === 'on',
});

server.keepAliveTimeout = keepAliveMilliseconds;
server.headersTimeout = keepAliveMilliseconds + 5_000;

/** Answers that are not sent yet. */
const underWay = new Set<ServerResponse>();
let stopping = false;
server.prependListener('request', (_, response) => {
  underWay.add(response);
  response.once('close', () => underWay.delete(response));
  if (stopping) response.setHeader('Connection', 'close');
});

/** Takes nothing new, lets requests under way finish, and ends with them; a proxy is told not to send on their connections. */
function stop() {
  stopping = true;
  for (const response of underWay) if (!response.headersSent) response.setHeader('Connection', 'close');
  server.close(() => process.exit(0));
  // A connection is idle again as soon as its request is answered.
  setInterval(() => server.closeIdleConnections(), 200).unref();
  setTimeout(() => server.closeAllConnections(), graceMilliseconds).unref();
}

server.once('error', (error) => {
  const problem = portError(error, port, host).message;
  if (process.send) process.send({ problem }, () => process.exit(1));
  else process.stderr.write(`${problem}\n`, () => process.exit(1));
});
server.listen(port, host, () => {
  const url = `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
  if (process.send) process.send({ url });
  else console.log(`ready ${url}`);
});
for (const name of ['SIGINT', 'SIGTERM', 'disconnect'] as const) process.once(name, stop);
