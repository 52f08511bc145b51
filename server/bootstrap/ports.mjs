import net from 'node:net';

/**
 * Whether a server could listen there now.
 * @param {string} host
 * @param {number} port
 * @returns {Promise<boolean>}
 */
export function portIsFree(host, port) {
  return new Promise((resolve) => {
    const server = net.createServer();
    server.once('error', () => resolve(false));
    server.listen({ host, port, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

/**
 * The first free port from the wanted one on.
 * @param {string} host
 * @param {number} wanted
 */
export async function nextFreePort(host, wanted) {
  for (let port = wanted; port < wanted + 200 && port < 65_536; port++) {
    if (await portIsFree(host, port)) return port;
  }
  return anyFreePort(host);
}

/**
 * A free port that the system chooses.
 * @param {string} host
 * @returns {Promise<number>}
 */
export function anyFreePort(host) {
  return new Promise((resolve, reject) => {
    const server = net.createServer();
    server.once('error', reject);
    server.listen({ host, port: 0 }, () => {
      const address = server.address();
      const port = typeof address === 'object' && address !== null ? address.port : 0;
      server.close(() => resolve(port));
    });
  });
}
