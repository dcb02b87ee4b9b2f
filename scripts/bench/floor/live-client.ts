import { liveMessageSchema, type LiveMessage } from '@/lib/schemas/floor';

/** Events of one server-sent event stream, as their data; `data:` lines alone are used here. */
async function* eventsOf(body: ReadableStream<Uint8Array>): AsyncGenerator<string> {
  const decoder = new TextDecoder();
  let rest = '';
  for await (const chunk of body) {
    const blocks = (rest + decoder.decode(chunk, { stream: true })).split('\n\n');
    rest = blocks.pop() ?? '';
    for (const block of blocks) if (block.startsWith('data: ')) yield block.slice('data: '.length);
  }
}

/**
 * Reads the web's event stream without any browser, until `signal` aborts; `atMs` is when the message was here, since
 * 1970. @throws Error when the stream does not open or ends by itself
 */
export async function followLive(
  url: string,
  cookie: string,
  onMessage: (message: LiveMessage, atMs: number) => void,
  signal: AbortSignal,
): Promise<void> {
  try {
    const response = await fetch(`${url}/api/live`, { headers: { cookie }, signal });
    if (!response.ok || !response.body) throw new Error(`The event stream does not open: ${response.status}`);
    for await (const text of eventsOf(response.body)) {
      const atMs = Date.now();
      onMessage(liveMessageSchema.parse(JSON.parse(text)), atMs);
    }
    throw new Error('The event stream has ended');
  } catch (error) {
    if (!signal.aborted) throw error;
  }
}
