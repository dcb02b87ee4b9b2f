import { connect, createServer } from 'node:net';

/**
 * Whether nobody listens on `port` of `host`. Any other failure (no right, unknown host) is thrown.
 * @param {string} host @param {number} port @returns {Promise<boolean>}
 */
export function isPortFree(host, port) {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', (error) => {
      if ('code' in error && error.code === 'EADDRINUSE') resolve(false);
      else reject(error);
    });
    probe.listen({ host, port, exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/**
 * Ports of 127.0.0.1 that nobody uses, all held at once while choosing so that they differ.
 * @param {number} count @returns {Promise<number[]>}
 */
export async function freePorts(count) {
  const probes = Array.from({ length: count }, () => createServer());
  const ports = await Promise.all(probes.map(listenAnywhere));
  await Promise.all(probes.map((probe) => new Promise((done) => probe.close(done))));
  return ports;
}

/** @param {import('node:net').Server} probe @returns {Promise<number>} */
function listenAnywhere(probe) {
  return new Promise((resolve, reject) => {
    probe.once('error', reject);
    probe.listen({ host: '127.0.0.1', port: 0 }, () => {
      const address = probe.address();
      if (address && typeof address === 'object') resolve(address.port);
      else reject(new Error('No port was given'));
    });
  });
}

/**
 * Waits until something accepts connections on `port`.
 * Throws after `timeoutMs`, or as soon as `gaveUp` says that it will never come.
 * @param {string} host @param {number} port @param {number} timeoutMs @param {() => boolean} [gaveUp]
 */
export async function waitForPort(host, port, timeoutMs, gaveUp = () => false) {
  const deadline = Date.now() + timeoutMs;
  while (!(await accepts(host, port))) {
    if (gaveUp()) throw new Error(`What should listen on port ${port} has ended`);
    if (Date.now() > deadline) throw new Error(`Nothing listens on port ${port} after ${timeoutMs} ms`);
    await pause(50);
  }
}

/** @param {string} host @param {number} port @returns {Promise<boolean>} */
function accepts(host, port) {
  return new Promise((resolve) => {
    const socket = connect({ host, port });
    socket.once('connect', () => {
      socket.destroy();
      resolve(true);
    });
    socket.once('error', () => resolve(false));
  });
}

/** @param {number} ms */
export function pause(ms) {
  return new Promise((done) => setTimeout(done, ms));
}
