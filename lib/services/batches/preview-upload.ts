import { previewUploadSchema, type UploadPreview } from '@/lib/schemas/upload';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { readUpload } from './read-upload';
import { fileDigest, findSameFile } from './same-file';

/** Says line by line what is understood of a cut list, and whether this very file was uploaded before. Saves nothing. */
export async function previewUpload({
  ctx,
  input,
  bytes,
}: {
  ctx: ServiceContext;
  input: unknown;
  bytes: Uint8Array;
}): Promise<UploadPreview> {
  authorise(ctx, 'batches.write');
  const { fileName } = parseInput(previewUploadSchema, input);
  const reading = await readUpload(ctx, bytes);
  return { fileName, ...reading, sameFile: await findSameFile(ctx, fileDigest(bytes)) };
}
