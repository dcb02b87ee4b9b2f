/** Bundles of TypeScript entries, kept below node_modules/.cache and made anew when a source changed. */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdir, readFile, readdir, rename, rm, stat, writeFile } from 'node:fs/promises';
import { basename, dirname, join, relative, resolve } from 'node:path';
import { repo } from './repo.mjs';
import { Trouble } from './trouble.mjs';

const cacheDir = join(repo, 'node_modules', '.cache', 'ellwand');
/** Part of every hash: raise it when the options below change. */
const OPTIONS_VERSION = 1;
const KEEP_OLD_BUNDLES_MS = 24 * 3_600_000;

/**
 * @typedef {object} Manifest
 * @property {string} bundle file name of the bundle, beside the manifest
 * @property {Record<string, string>} inputs hash of every source, by path below the repository
 */

/**
 * Bundles `entry` (absolute path of a .ts file) when stale; several processes may do so at once.
 * Returns the absolute path of the bundle. Throws when a source cannot be compiled.
 * @param {string} entry
 * @returns {Promise<string>}
 */
export async function bundleEntry(entry) {
  const name = nameOf(entry);
  const manifest = await readManifest(name);
  if (manifest && (await isFresh(manifest))) return join(cacheDir, manifest.bundle);
  buildApart(entry);
  const made = await readManifest(name);
  if (!made) throw new Trouble(`${entry} left no bundle`);
  return join(cacheDir, made.bundle);
}

/**
 * In a process of its own: the compiler and its service would stay in this one, which may run for days.
 * @param {string} entry
 */
function buildApart(entry) {
  const builder = join(repo, 'scripts', 'house', 'build-bundle.mjs');
  const { status, error } = spawnSync(process.execPath, [builder, entry], { stdio: 'inherit' });
  if (status !== 0) throw new Trouble(`${entry} could not be compiled`, { cause: error });
}

/** @param {string} entry */
function nameOf(entry) {
  const path = relative(repo, entry);
  return `${basename(entry).replace(/\.\w+$/, '')}-${hashOf(path).slice(0, 8)}`;
}

/** @param {string | Uint8Array} content */
function hashOf(content) {
  return createHash('sha256').update(String(OPTIONS_VERSION)).update(content).digest('hex').slice(0, 24);
}

/** @param {string} name @returns {Promise<Manifest | undefined>} */
async function readManifest(name) {
  const text = await readFile(join(cacheDir, `${name}.json`), 'utf8').catch(() => undefined);
  return text === undefined ? undefined : JSON.parse(text);
}

/** @param {Manifest} manifest */
async function isFresh(manifest) {
  const checks = Object.entries(manifest.inputs).map(async ([path, hash]) => {
    const content = await readFile(resolve(repo, path)).catch(() => undefined);
    return content !== undefined && hashOf(content) === hash;
  });
  const present = stat(join(cacheDir, manifest.bundle)).then(
    () => true,
    () => false,
  );
  return (await Promise.all([present, ...checks])).every(Boolean);
}

/**
 * Compiles `entry` (absolute path) and writes its bundle and manifest, whether stale or not.
 * @param {string} entry
 */
export async function buildBundle(entry) {
  const name = nameOf(entry);
  const { build, stop } = await import('esbuild');
  const result = await build({
    entryPoints: [entry],
    absWorkingDir: repo,
    outfile: join(cacheDir, `${name}.mjs`),
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    packages: 'external',
    sourcemap: 'inline',
    sourcesContent: false,
    metafile: true,
    write: false,
    logLevel: 'error',
    tsconfig: join(repo, 'tsconfig.json'),
  });
  await stop();
  const code = result.outputFiles[0]?.contents ?? new Uint8Array();
  const bundle = `${name}-${hashOf(code)}.mjs`;
  /** @type {Manifest} */
  const manifest = { bundle, inputs: await hashInputs(Object.keys(result.metafile.inputs)) };
  await mkdir(cacheDir, { recursive: true });
  await writeWhole(join(cacheDir, bundle), code);
  await writeWhole(join(cacheDir, `${name}.json`), JSON.stringify(manifest));
  await dropOld(name, bundle);
}

/** @param {string[]} paths below the repository @returns {Promise<Record<string, string>>} */
async function hashInputs(paths) {
  const settings = ['tsconfig.json', 'package-lock.json'];
  const pairs = [...paths, ...settings].map(async (path) => [
    path,
    hashOf(await readFile(resolve(repo, path))),
  ]);
  return Object.fromEntries(await Promise.all(pairs));
}

/**
 * Written under another name and renamed, so that nobody ever imports half a file.
 * @param {string} path @param {string | Uint8Array} content
 */
async function writeWhole(path, content) {
  const draft = join(dirname(path), `.${process.pid}-${basename(path)}`);
  await writeFile(draft, content);
  await rename(draft, path);
}

/** @param {string} name @param {string} current bundles of the same entry that nobody used for a day are removed */
async function dropOld(name, current) {
  for (const file of await readdir(cacheDir)) {
    if (!file.startsWith(`${name}-`) || !file.endsWith('.mjs') || file === current) continue;
    const path = join(cacheDir, file);
    const { mtimeMs } = await stat(path);
    if (Date.now() - mtimeMs > KEEP_OLD_BUNDLES_MS) await rm(path, { force: true });
  }
}
