import { pause } from './ports.mjs';
import { Trouble } from './trouble.mjs';

const HEALTHY_TIMEOUT_MS = 60_000;
const HEALTH_ANSWER_MS = 3000;

/**
 * Waits until the web says that database, queue and worker are there. Throws a Trouble with its last answer.
 * @param {string} url @param {AbortSignal} [signal]
 */
export async function waitUntilHealthy(url, signal) {
  const deadline = Date.now() + HEALTHY_TIMEOUT_MS;
  let last = 'no answer';
  while (Date.now() < deadline) {
    signal?.throwIfAborted();
    const answer = await askHealth(url);
    if (answer === 'healthy') return;
    last = answer;
    await pause(250);
  }
  throw new Trouble(`The web does not get healthy: ${last}\nSee the logs in the data folder.`);
}

/**
 * The limit is a race of our own: a fetch was once seen to wait for ever beside an AbortSignal.timeout.
 * @param {string} url @returns {Promise<string>} "healthy", or what came instead
 */
function askHealth(url) {
  const giveUp = new AbortController();
  const limit = pause(HEALTH_ANSWER_MS).then(() => {
    giveUp.abort();
    return 'no answer in time';
  });
  return Promise.race([askOnce(url, giveUp.signal), limit]);
}

/** @param {string} url @param {AbortSignal} signal */
async function askOnce(url, signal) {
  try {
    const response = await fetch(`${url}/api/health`, { signal });
    return response.status === 200 ? 'healthy' : `${response.status} ${await response.text()}`.slice(0, 300);
  } catch (error) {
    return error instanceof Error ? error.message : 'no answer';
  }
}
