/**
 * `node scripts/run.mjs ENTRY [--] ARGS`: runs a TypeScript entry in this very process, bundled when its sources
 * changed. A process that serves for days carries neither a compiler nor a loader this way.
 */
import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { bundleEntry } from './house/bundle.mjs';
import { printTrouble } from './house/trouble.mjs';

const [entry, ...rest] = process.argv.slice(2);
if (!entry) {
  console.error('Say what to run: node scripts/run.mjs ENTRY [--] ARGS');
  process.exit(2);
}

const path = resolve(entry);
const bundle = await bundleEntry(path).catch((/** @type {unknown} */ error) => {
  printTrouble(error);
  process.exit(1);
});
process.argv = [process.argv[0] ?? 'node', path, ...(rest[0] === '--' ? rest.slice(1) : rest)];
process.setSourceMapsEnabled(true);
await import(pathToFileURL(bundle).href);
