import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, it } from 'vitest';
import { demoAccount, openSignedIn } from '@/tests/support/browser-desk';
import { openBrowser } from '@/tests/support/chromium';

const LOST_WITHIN_MS = 5_000;
const LOST = 'The link to Ellwand is lost.';
const house = inject('house');
let browser: Browser;

beforeAll(async () => {
  browser = await openBrowser();
});

afterAll(async () => {
  await browser.close();
});

function operator(): Promise<Page> {
  return openSignedIn(browser, house, demoAccount('operator', house));
}

async function openFloor(page: Page): Promise<void> {
  await page.goto('/');
  await page.getByText('· live').waitFor();
  await page.locator('[data-rig="Siskin"][data-state="ready"]').waitFor();
}

it('says within 5 s that the link is lost, marks every rig as stale, and takes it back when the link is', async () => {
  const page = await operator();
  await openFloor(page);
  await page.context().setOffline(true);
  const cutAtMs = performance.now();
  await page.getByRole('alert').filter({ hasText: LOST }).waitFor({ timeout: LOST_WITHIN_MS });
  expect(performance.now() - cutAtMs).toBeLessThan(LOST_WITHIN_MS);
  expect(await page.locator('[data-rig]:not([data-state="silent"])').count()).toBe(0);
  await page.getByText('· not live').waitFor();

  await page.context().setOffline(false);
  await page.locator('[data-rig="Siskin"][data-state="ready"]').waitFor();
  await page.getByRole('alert').filter({ hasText: LOST }).waitFor({ state: 'detached' });
  await page.context().close();
});

it('reads one event stream for two tabs, and the second goes on when the first is closed', async () => {
  const first = await operator();
  const streams: string[] = [];
  first.context().on('request', (request) => {
    if (request.url().endsWith('/api/live')) streams.push(request.url());
  });
  await openFloor(first);
  const second = await first.context().newPage();
  await openFloor(second);
  // A rig is told anew every second: the second tab has news although the first alone reads the stream.
  await second.getByText('· live').waitFor();
  expect(streams.length).toBe(1);

  await first.close();
  await expect.poll(() => streams.length, { timeout: LOST_WITHIN_MS }).toBe(2);
  await second.getByText('· live').waitFor();
  await second.context().close();
});
