import { z } from 'zod';
import { ERRORS, type ErrorCode, type FieldProblem } from '@/lib/errors';
import {
  createdBatchSchema,
  sameFileSchema,
  type UploadPreview,
  uploadPreviewSchema,
} from '@/lib/schemas/upload';

const TIMEOUT_MS = 20_000;

/** What was answered to a file: the data, or why not. */
export type Sent<Data> = { ok: true; data: Data } | { ok: false; refusal: UploadRefusal };

export interface UploadRefusal {
  code: ErrorCode;
  title: string;
  fields: FieldProblem[];
  /** Of `same-file`: the batch that was made of it. */
  sameFile: z.infer<typeof sameFileSchema> | null;
}

const codes = Object.keys(ERRORS) as [ErrorCode, ...ErrorCode[]];
const problemSchema = z.object({
  code: z.enum(codes),
  fields: z.array(z.object({ path: z.string(), message: z.string() })).catch([]),
  details: sameFileSchema.nullable().catch(null),
});

function refusalOf(body: unknown): UploadRefusal {
  const parsed = problemSchema.safeParse(body);
  if (!parsed.success)
    return { code: 'unexpected', title: ERRORS.unexpected.title, fields: [], sameFile: null };
  const { code, fields, details } = parsed.data;
  return { code, title: ERRORS[code].title, fields, sameFile: details };
}

async function send<Schema extends z.ZodType>(
  path: string,
  file: Blob,
  schema: Schema,
): Promise<Sent<z.output<Schema>>> {
  let response: Response;
  try {
    response = await fetch(path, { method: 'POST', body: file, signal: AbortSignal.timeout(TIMEOUT_MS) });
  } catch {
    // The browser says no more than that it did not come through.
    return { ok: false, refusal: refusalOf({ code: 'service-away' }) };
  }
  const body: unknown = await response.json().catch(() => null);
  if (!response.ok) return { ok: false, refusal: refusalOf(body) };
  return { ok: true, data: schema.parse(body) };
}

/** Asks what is understood of a cut list; nothing is saved. Never throws for what the server or the network says. */
export function askForPreview(file: File): Promise<Sent<UploadPreview>> {
  return send(
    `/api/batches/upload/preview?${new URLSearchParams({ fileName: file.name })}`,
    file,
    uploadPreviewSchema,
  );
}

/** Saves a cut list as a batch. `input` as `createFromUploadSchema` has it, in words of a URL. */
export function sendUpload(file: File, input: Record<string, string>): Promise<Sent<{ batchId: string }>> {
  const params = new URLSearchParams({ ...input, fileName: file.name });
  return send(`/api/batches/upload?${params}`, file, createdBatchSchema);
}
