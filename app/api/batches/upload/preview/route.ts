import { readBytes } from '@/lib/http/read-bytes';
import { personRoute } from '@/lib/http/route';
import { previewUpload } from '@/lib/services/batches/preview-upload';
import { CUT_LIST_BYTES_MOST } from '@/lib/wire/cut-list/reading';

/** The file is the body; its name stands in the query. Nothing is saved. */
export const POST = personRoute(async ({ ctx, request }) => {
  const input = Object.fromEntries(new URL(request.url).searchParams);
  const bytes = await readBytes(request, CUT_LIST_BYTES_MOST);
  return previewUpload({ ctx, input, bytes });
});
