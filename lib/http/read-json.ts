import { EllwandError } from '@/lib/errors';
import { readBytes } from './read-bytes';

const BYTES_MAX = 1_000_000;

/**
 * The body as JSON, not yet parsed by a schema.
 * @throws EllwandError `file-too-large` beyond `bytesMax`, `bad-input` when it is no JSON.
 */
export async function readJson(request: Request, bytesMax = BYTES_MAX): Promise<unknown> {
  const text = await readText(request, bytesMax);
  try {
    return JSON.parse(text);
  } catch (cause) {
    throw new EllwandError('bad-input', { fields: [{ path: '', message: 'Send JSON.' }], cause });
  }
}

/** The body as text, read no further than `bytesMax`. @throws EllwandError `file-too-large` */
export async function readText(request: Request, bytesMax = BYTES_MAX): Promise<string> {
  return Buffer.from(await readBytes(request, bytesMax)).toString('utf8');
}
