import net from 'node:net';
import { StartError } from './say.mjs';

/** @returns {Promise<number>} a port on loopback that nobody listens on */
export function findFreePort() {
  return listenOnce(0, '127.0.0.1');
}

/** @param {number} port @param {string} host */
export async function requireFreePort(port, host) {
  try {
    await listenOnce(port, host);
  } catch (error) {
    throw portError(/** @type {NodeJS.ErrnoException} */ (error), port, host);
  }
}

/** @param {NodeJS.ErrnoException} error @param {number} port @param {string} host */
export function portError(error, port, host) {
  if (error.code === 'EADDRINUSE')
    return new StartError(`PORT ${port} is in use: stop what listens there, or set PORT to another number.`);
  if (error.code === 'EACCES')
    return new StartError(`PORT ${port} needs more rights than this user has: set PORT to a number above 1023.`);
  return new StartError(
    `HOST ${host} cannot be listened on (${error.code ?? error.message}): set HOST to an address of this machine.`,
  );
}

/** @param {number} port @param {string} host @returns {Promise<number>} */
function listenOnce(port, host) {
  return new Promise((resolve, reject) => {
    const server = net.createServer();
    server.once('error', reject);
    server.listen(port, host, () => {
      const address = /** @type {net.AddressInfo} */ (server.address());
      server.close(() => resolve(address.port));
    });
  });
}
