/** Compression would hold a stream's lines back: `no-transform` keeps every part of the way from it. */
const STREAM_HEADERS = { 'cache-control': 'no-store, no-transform', 'x-accel-buffering': 'no' };

/** A response that stays open and is read as it grows. */
export function streamResponse(
  body: ReadableStream<Uint8Array>,
  type: 'text/event-stream' | 'application/x-ndjson',
): Response {
  return new Response(body, { headers: { ...STREAM_HEADERS, 'content-type': type } });
}
