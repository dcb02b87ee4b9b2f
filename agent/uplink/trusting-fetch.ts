import { request, Agent } from 'node:https';
import type { IncomingMessage } from 'node:http';
import { rootCertificates } from 'node:tls';

/** Answers that have no body, which a `Response` refuses to be given one for (Fetch standard). */
const NO_BODY = [204, 205, 304];

/**
 * `fetch` for an https server whose certificate an own authority may vouch for, beside those that Node knows. Node's
 * own fetch takes no authority but from the environment of its start; this one concerns these calls alone.
 * It does what the agent's calls need: a text body or none, the caller's headers, a signal, a streamed answer.
 * @param pem certificates of the authority
 */
export function fetchTrusting(pem: string): typeof fetch {
  const agent = new Agent({ keepAlive: true, ca: [...rootCertificates, pem] });
  return (input, init) => {
    const url = input instanceof Request ? input.url : input;
    return new Promise((resolve, reject) => {
      const { method, body, signal } = init ?? {};
      const headers = Object.fromEntries(new Headers(init?.headers));
      const call = request(url, { agent, method, headers, signal: signal ?? undefined }, (answer) =>
        resolve(responseOf(answer)),
      );
      call.on('error', reject);
      call.end(typeof body === 'string' ? body : undefined);
    });
  };
}

function responseOf(answer: IncomingMessage): Response {
  const status = answer.statusCode ?? 500;
  const headers = new Headers();
  for (const [name, value] of Object.entries(answer.headers)) {
    if (value !== undefined) headers.set(name, Array.isArray(value) ? value.join(', ') : value);
  }
  if (NO_BODY.includes(status)) {
    answer.resume();
    return new Response(null, { status, headers });
  }
  return new Response(streamOf(answer), { status, headers });
}

/** Chunk by chunk as it is read, so that an answer nobody reads fills no memory. */
function streamOf(answer: IncomingMessage): ReadableStream<Uint8Array> {
  const chunks: AsyncIterator<Uint8Array> = answer[Symbol.asyncIterator]();
  return new ReadableStream({
    async pull(controller) {
      const { done, value } = await chunks.next();
      if (done === true) controller.close();
      else controller.enqueue(value);
    },
    cancel: () => void answer.destroy(),
  });
}
