import { build } from 'esbuild';
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Mutant } from './mutants';

/**
 * Bundles the agent with one thing left out.
 * @returns the path of the bundle
 * @throws Error when the text to be changed does not stand in its file exactly once: the mutant needs to be renewed
 */
export async function bundleMutant({ name, edits }: Mutant, repo: string): Promise<string> {
  const outfile = join(repo, 'node_modules', '.cache', 'ellwand', `mutant-${name}.mjs`);
  const files = [...new Set(edits.map(({ file }) => file))];
  await build({
    entryPoints: [join(repo, 'agent/main.ts')],
    absWorkingDir: repo,
    outfile,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    logLevel: 'error',
    tsconfig: join(repo, 'tsconfig.json'),
    plugins: [
      {
        name: 'mutant',
        setup: ({ onLoad }) => {
          for (const file of files) {
            const filter = new RegExp(`/${file.replaceAll('.', '\\.')}$`);
            onLoad({ filter }, async ({ path }) => ({
              loader: 'ts',
              contents: edits
                .filter((edit) => edit.file === file)
                .reduce(
                  (text, { find, replace }) => replaceOnce(text, find, replace, file),
                  await readFile(path, 'utf8'),
                ),
            }));
          }
        },
      },
    ],
  });
  return outfile;
}

function replaceOnce(text: string, find: string, replace: string, file: string): string {
  const parts = text.split(find);
  if (parts.length !== 2) throw new Error(`${file} has ${parts.length - 1} times: ${find}`);
  return parts.join(replace);
}
