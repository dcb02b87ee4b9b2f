import { EllwandError } from '@/lib/errors';

/** The body as it came, read no further than `bytesMax`. @throws EllwandError `file-too-large` */
export async function readBytes(request: Request, bytesMax: number): Promise<Uint8Array> {
  const chunks: Uint8Array[] = [];
  let bytes = 0;
  for await (const chunk of request.body ?? []) {
    bytes += chunk.byteLength;
    if (bytes > bytesMax) throw new EllwandError('file-too-large');
    chunks.push(chunk);
  }
  return Buffer.concat(chunks);
}
