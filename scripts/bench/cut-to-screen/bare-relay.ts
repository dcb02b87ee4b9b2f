import { once } from 'node:events';
import { createServer, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Browser, Page } from 'playwright-core';

declare global {
  interface Window {
    benchDelays: number[];
  }
}

const PAGE = `<!doctype html><title>relay</title><script>
  window.benchDelays = [];
  window.opened = new EventSource('/events');
  window.opened.onmessage = ({ data }) => window.benchDelays.push(Date.now() - Number(data));
</script>`;

/** The least that the path can be: a POST over the loopback, passed on at once as a server-sent event to a page. */
export interface BareRelay {
  /** Sends the present time through it. */
  send(): Promise<void>;
  /** How long each took to be in the page, ms. */
  delaysMs(): Promise<number[]>;
  close(): Promise<void>;
}

export async function openBareRelay(browser: Browser): Promise<BareRelay> {
  let readers: ServerResponse[] = [];
  let connected: () => void = () => undefined;
  const listening = new Promise<void>((resolve) => {
    connected = resolve;
  });
  const server = createServer((request, response) => {
    if (request.method === 'POST') {
      request.setEncoding('utf8').on('data', (sent: string) => {
        for (const reader of readers) reader.write(`data: ${sent}\n\n`);
      });
      request.on('end', () => response.writeHead(204).end());
    } else if (request.url === '/events') {
      response.writeHead(200, { 'content-type': 'text/event-stream' }).flushHeaders();
      readers = [...readers, response];
      connected();
    } else {
      response.writeHead(200, { 'content-type': 'text/html' }).end(PAGE);
    }
  });
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const context = await browser.newContext();
  const page: Page = await context.newPage();
  await page.goto(url);
  await listening;
  return {
    async send() {
      await fetch(url, { method: 'POST', body: String(Date.now()) });
    },
    delaysMs: () => page.evaluate(() => window.benchDelays),
    async close() {
      await context.close();
      server.close();
      server.closeAllConnections();
    },
  };
}
