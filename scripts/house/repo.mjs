import { fileURLToPath } from 'node:url';

/** The repository's folder, absolute, without a slash at the end. */
export const repo = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');
