/**
 * `npm run build:agent [-- FOLDER]`: the agent as one folder that runs with Node alone, by default dist-agent/. Its
 * serial port is native code: the builds for Linux come along, and are found from lib/ as from their own package.
 */
import { chmod, copyFile, cp, mkdir, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { dirname, join, resolve } from 'node:path';
import { build } from 'esbuild';
import { repo } from './house/repo.mjs';

const FILES = ['README.md', 'agent.example.json', 'ellwand-agent.service', '60-ellwand-rigs.rules'];
const START = 'ellwand-agent';
/** What CommonJS packages expect to find, in a bundle that is a module. */
const COMMONJS = `
import { createRequire as ellwandCreateRequire } from 'node:module';
import { dirname as ellwandDirname } from 'node:path';
import { fileURLToPath as ellwandFileURLToPath } from 'node:url';
const require = ellwandCreateRequire(import.meta.url);
const __filename = ellwandFileURLToPath(import.meta.url);
const __dirname = ellwandDirname(__filename);
`.trim();

/** @param {string} folder of the package, or any path within @returns {string} */
function packageOf(folder) {
  const parts = folder.split('node_modules/');
  const [scope, name] = (parts.pop() ?? '').split('/');
  return [...parts, scope?.startsWith('@') ? `${scope}/${name}` : (scope ?? '')].join('node_modules/');
}

/** @param {string} target absolute */
async function bundle(target) {
  const { metafile } = await build({
    entryPoints: [join(repo, 'agent/main.ts')],
    absWorkingDir: repo,
    outfile: join(target, 'lib/agent.mjs'),
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    banner: { js: COMMONJS },
    metafile: true,
    logLevel: 'error',
    tsconfig: join(repo, 'tsconfig.json'),
  });
  const inputs = Object.keys(metafile.inputs).filter((path) => path.includes('node_modules/'));
  return [...new Set(inputs.map(packageOf))].sort();
}

/** @param {string} target @param {string[]} packages folders below the repository, whose code is in the bundle */
async function writeLicences(target, packages) {
  const texts = await Promise.all(
    packages.map(async (folder) => {
      const names = await readdir(join(repo, folder));
      const licence = names.find((name) => /^licen[cs]e/i.test(name));
      const { name, version, license } = JSON.parse(
        await readFile(join(repo, folder, 'package.json'), 'utf8'),
      );
      const text = licence ? await readFile(join(repo, folder, licence), 'utf8') : `Licence: ${license}`;
      return `${name} ${version}\n\n${text.trim()}\n`;
    }),
  );
  const own = await readFile(join(repo, 'LICENSE'), 'utf8');
  await writeFile(
    join(target, 'LICENCES.txt'),
    [`Ellwand\n\n${own}`, ...texts].join(`\n${'-'.repeat(72)}\n\n`),
  );
}

/** @param {string} target */
async function copyNativeBuilds(target) {
  const bindings = dirname(createRequire(import.meta.url).resolve('@serialport/bindings-cpp/package.json'));
  const prebuilds = join(bindings, 'prebuilds');
  for (const name of await readdir(prebuilds)) {
    if (!name.startsWith('linux-')) continue;
    await cp(join(prebuilds, name), join(target, 'prebuilds', name), { recursive: true });
  }
}

/** Builds the agent's folder at `target`, which is emptied first. @param {string} target absolute */
export async function buildAgent(target) {
  await rm(target, { recursive: true, force: true });
  await mkdir(target, { recursive: true });
  await writeLicences(target, await bundle(target));
  await copyNativeBuilds(target);
  for (const name of [...FILES, START]) await copyFile(join(repo, 'agent/package', name), join(target, name));
  await chmod(join(target, START), 0o755);
}

if (process.argv[1] && resolve(process.argv[1]) === import.meta.filename) {
  const target = resolve(process.argv[2] ?? join(repo, 'dist-agent'));
  await buildAgent(target);
  console.log(`The agent is in ${target}: README.md there says what to do with it.`);
}
