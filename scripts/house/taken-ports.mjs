import { isPortFree } from './ports.mjs';
import { PORT_SETTINGS } from './settings.mjs';
import { Trouble } from './trouble.mjs';

/**
 * Throws a Trouble that names the port and the setting that moves it, when one of ours is taken or cannot be used.
 * @param {import('./settings.mjs').Settings} settings
 */
export async function refuseTakenPorts(settings) {
  const seen = new Map();
  for (const { key, setting, what } of PORT_SETTINGS) {
    const port = settings[key];
    if (seen.has(port))
      throw new Trouble(`${setting} and ${seen.get(port)} are both ${port}: give them different ports.`);
    seen.set(port, setting);
    const host = key === 'port' ? settings.host : '127.0.0.1';
    if (!(await isFreeOrRefuse(host, port, setting))) {
      throw new Trouble(`Port ${port}, meant for ${what}, is taken. Set ${setting} to another one.`);
    }
  }
}

/** @param {string} host @param {number} port @param {string} setting */
async function isFreeOrRefuse(host, port, setting) {
  try {
    return await isPortFree(host, port);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? error.code : undefined;
    if (code === 'EACCES')
      throw new Trouble(`This user may not use port ${port}. Set ${setting} to one above 1023.`);
    throw new Trouble(`ELLWAND_HOST=${host} is no address of this computer (${code}).`, { cause: error });
  }
}
