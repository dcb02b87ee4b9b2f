import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, it } from 'vitest';
import { demoAccount, openSignedIn } from '@/tests/support/browser-desk';
import { openRelay, type Relay } from '@/tests/support/browser-relay';
import { openBrowser } from '@/tests/support/chromium';
import { runningIn } from '@/tests/support/start-command';

const LOST_WITHIN_MS = 5_000;
/** Seconds, with a whole page to load on a busy computer. */
const ENDED_WITHIN_MS = 10_000;
const LOST = 'The link to Ellwand is lost.';
const RIG = 'Siskin';
const house = inject('house');
let browser: Browser;
let cable: Relay;

beforeAll(async () => {
  browser = await openBrowser();
  cable = await openRelay(house.url);
});

afterAll(async () => {
  await browser.close();
  await cable.close();
});

function operator(url = house.url): Promise<Page> {
  return openSignedIn(browser, { url }, demoAccount('operator', house));
}

async function openFloor(page: Page): Promise<void> {
  await page.goto('/');
  await page.getByText('· live').waitFor();
  await isHeard(page);
}

function isHeard(page: Page): Promise<void> {
  return page.locator(`[data-rig="${RIG}"]:not([data-state="silent"])`).waitFor();
}

/** The page says that the link is lost, in time, and tells no rig's state as if it knew it. */
async function saysLost(page: Page): Promise<void> {
  const sinceMs = performance.now();
  await page.getByRole('alert').filter({ hasText: LOST }).waitFor({ timeout: LOST_WITHIN_MS });
  expect(performance.now() - sinceMs).toBeLessThan(LOST_WITHIN_MS);
  await page.getByText('· not live').waitFor();
  await page.getByText('When last heard:').waitFor();
  expect(await page.locator('[data-rig]:not([data-state="silent"])').count()).toBe(0);
}

function atSignIn(page: Page): Promise<void> {
  return page.waitForURL((url) => url.pathname === '/sign-in', { timeout: ENDED_WITHIN_MS });
}

async function comesBack(page: Page): Promise<void> {
  await page.getByRole('alert').filter({ hasText: LOST }).waitFor({ state: 'detached' });
  await isHeard(page);
}

it('says within 5 s that the network is gone, marks every rig as stale, and comes back by itself', async () => {
  const page = await operator(cable.url);
  await openFloor(page);
  cable.cut();
  await saysLost(page);
  cable.mend();
  await comesBack(page);
  await page.context().close();
});

it('says within 5 s that the server no longer answers, although the connection stands', async () => {
  const page = await operator();
  await openFloor(page);
  const web = runningIn(house.dataDir).find(({ name }) => name === 'web');
  if (!web) throw new Error('The house has no web');
  process.kill(-web.identity.pid, 'SIGSTOP');
  try {
    await saysLost(page);
  } finally {
    process.kill(-web.identity.pid, 'SIGCONT');
  }
  await comesBack(page);
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
  expect(streams.length).toBe(1);

  await first.close();
  await expect.poll(() => streams.length, { timeout: LOST_WITHIN_MS }).toBe(2);
  await isHeard(second);
  await second.context().close();
});

it('ends the open pages of a person within seconds of their being disabled, one that was away as soon as it is back', async () => {
  const account = { email: 'nils@ellwand-demo.example', password: 'three blue spools' };
  const owner = await openSignedIn(browser, house, demoAccount('owner', house));
  await owner.goto('/setup/people');
  await owner.getByLabel('Name', { exact: true }).fill('Nils Aarva');
  await owner.getByLabel('E-mail').fill(account.email);
  await owner.getByLabel('First password').fill(account.password);
  const add = owner.locator('form').filter({ has: owner.getByRole('heading', { name: 'Add a person' }) });
  await add.getByLabel(/^operator/).check();
  await add.getByRole('button', { name: 'Add' }).click();
  await owner.getByText('Change Nils Aarva').click();

  const live = await openSignedIn(browser, house, account);
  const away = await openSignedIn(browser, cable, account);
  await openFloor(live);
  await openFloor(away);
  cable.cut();
  const row = owner.getByRole('listitem').filter({ hasText: account.email });
  await row.getByRole('button', { name: 'Disable' }).click();
  await atSignIn(live);
  await live.goto('/');
  await atSignIn(live);
  cable.mend();
  await atSignIn(away);
  await Promise.all([owner, live, away].map((page) => page.context().close()));
});
