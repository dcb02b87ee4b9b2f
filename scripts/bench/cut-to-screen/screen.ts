import type { Browser, BrowserContext, Page } from 'playwright-core';
import { liveMessageSchema } from '@/lib/schemas/floor';
import type { Cookie } from '../floor/sign-in';
import { sightingOf } from './sighting';

declare global {
  interface Window {
    /** Events of the page's own stream, with the page's wall time when each was handed to it. */
    benchEvents: [atMs: number, data: string][];
  }
}

/** Runs in the page before its own scripts: every stream that the page opens is overheard, first of all listeners. */
function overhear(): void {
  window.benchEvents = [];
  const Native = window.EventSource;
  window.EventSource = class extends Native {
    constructor(url: string | URL, init?: EventSourceInit) {
      super(url, init);
      this.addEventListener('message', (event: MessageEvent<string>) => {
        window.benchEvents.push([Date.now(), event.data]);
      });
    }
  };
}

/** The floor in a browser, signed in, with its event stream overheard. */
export async function openScreen(browser: Browser, url: string, cookies: readonly Cookie[]): Promise<Page> {
  const context: BrowserContext = await browser.newContext({ viewport: { width: 1440, height: 900 } });
  await context.addCookies(cookies.map((cookie) => ({ ...cookie, url })));
  const page = await context.newPage();
  await page.addInitScript(overhear);
  await page.goto(`${url}/`);
  await page.waitForFunction(() => window.benchEvents.length > 0);
  return page;
}

/** What the page was told of the rigs so far, in order. */
export async function readSightings(page: Page) {
  const events = await page.evaluate(() => window.benchEvents);
  return events.flatMap(([atMs, data]) => {
    const sighting = sightingOf(liveMessageSchema.parse(JSON.parse(data)), atMs);
    return sighting ? [sighting] : [];
  });
}
