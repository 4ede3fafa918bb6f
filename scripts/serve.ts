import { createShopServer } from './create-shop-server.ts';
import { distFolder } from './paths.mjs';
import { portError } from './port.mjs';

const graceMilliseconds = 5_000;
const port = Number(process.env['PORT'] ?? 4321);
const host = process.env['HOST'] ?? '127.0.0.1';

const server = await createShopServer(distFolder, {
  publicOrigin: process.env['PUBLIC_ORIGIN'] || undefined,
  trustProxy: process.env['TRUST_PROXY'] === 'on',
});

/** Lets requests under way finish, for a few seconds at most. */
function stop() {
  server.close(() => process.exit(0));
  server.closeIdleConnections();
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
