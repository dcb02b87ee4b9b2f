import { readBytes } from '@/lib/http/read-bytes';
import { personRoute } from '@/lib/http/route';
import { createBatchFromUpload } from '@/lib/services/batches/create-batch-from-upload';
import { CUT_LIST_BYTES_MOST } from '@/lib/wire/cut-list/reading';

/** The file is the body; what goes with it stands in the query. */
export const POST = personRoute(async ({ ctx, request }) => {
  const input = Object.fromEntries(new URL(request.url).searchParams);
  const bytes = await readBytes(request, CUT_LIST_BYTES_MOST);
  return createBatchFromUpload({ ctx, input, bytes });
});
