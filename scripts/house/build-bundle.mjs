/** `node build-bundle.mjs ENTRY`: started by bundle.mjs for a stale entry. */
import { buildBundle } from './bundle.mjs';

const [entry] = process.argv.slice(2);
if (!entry) throw new Error('No entry was given');
try {
  await buildBundle(entry);
} catch (error) {
  // The compiler has already shown the place; anything else is shown here.
  if (!(error instanceof Error && 'errors' in error)) console.error(error);
  process.exitCode = 1;
}
