import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { ERRORS, type ErrorCode } from '@/lib/errors';
import type { Role } from '@/lib/fleet/rights';
import { touchRig } from '@/tests/support/browser-control';
import { AT_THE_RIG, demoAccount, fillSignIn, openDesk, openSignedIn } from '@/tests/support/browser-desk';
import { AtRig } from '@/tests/support/browser-rig';
import { openBrowser } from '@/tests/support/chromium';

const RIG = 'Wren';
const ATTEMPTS_MAX = 5;
const house = inject('house');
let browser: Browser;

beforeAll(async () => {
  browser = await openBrowser();
});

afterAll(async () => {
  await browser.close();
});

function desk(role: Role): Promise<Page> {
  return openSignedIn(browser, { ...house, size: AT_THE_RIG }, demoAccount(role, house));
}

async function isRefused(page: Page, code: ErrorCode): Promise<void> {
  await page.getByRole('alert').filter({ hasText: ERRORS[code].title }).waitFor();
}

describe('signing in', () => {
  it('is refused with a wrong password, in words, and nobody is signed in', async () => {
    const page = await openDesk(browser, house);
    await page.goto('/sign-in');
    await fillSignIn(page, { ...demoAccount('maintainer', house), password: 'not-the-password' });
    await isRefused(page, 'sign-in-refused');
    await page.goto('/');
    await page.waitForURL((url) => url.pathname === '/sign-in');
    await page.context().close();
  });

  it('is limited: after five wrong passwords the account is asked to wait, also with the right one', async () => {
    const page = await openDesk(browser, house);
    await page.goto('/sign-in');
    const account = { email: 'nobody@ellwand-demo.example', password: 'not-the-password' };
    for (let attempt = 1; attempt <= ATTEMPTS_MAX; attempt += 1) {
      await fillSignIn(page, account);
      await isRefused(page, 'sign-in-refused');
      await page.reload();
    }
    await fillSignIn(page, account);
    await isRefused(page, 'too-many-attempts');
    await page.context().close();
  });
});

describe('roles', () => {
  it('give a scheduler no start, no notes to confirm and no work hold at a rig', async () => {
    const page = await desk('scheduler');
    const rig = await AtRig.open(page, RIG);
    await page.getByRole('heading', { name: 'Signals from the rig' }).waitFor();
    for (const name of [/^Trim and/, 'I have checked every point at the rig', 'I work on this rig']) {
      expect(await rig.button(name).count()).toBe(0);
    }
    await page.context().close();
  });

  it('keep an operator out of the upload and the set-up, by link and by address', async () => {
    const page = await desk('operator');
    await page.goto('/');
    const rooms = page.getByRole('navigation', { name: 'Rooms' });
    await rooms.getByRole('link', { name: 'Batches' }).waitFor();
    expect(await rooms.getByRole('link', { name: 'Set-up' }).count()).toBe(0);
    for (const path of ['/setup', '/setup/wires', '/setup/people', '/batches/upload', '/batches/new']) {
      await page.goto(path);
      await isRefused(page, 'not-allowed');
    }
    await page.goto('/batches');
    await page.getByRole('heading', { level: 1, name: 'Batches' }).waitFor();
    expect(await page.getByRole('link', { name: /Upload a cut list|New batch/ }).count()).toBe(0);
    await page.context().close();
  });
});

describe('a start is refused', () => {
  let page: Page;
  let rig: AtRig;

  beforeAll(async () => {
    page = await desk('operator');
    rig = await AtRig.open(page, RIG);
    await rig.isNow('ready');
  });

  afterAll(async () => {
    await page.context().close();
  });

  it('while the notes are unread: the page asks for them, the full text first', async () => {
    await page.getByText('Confirm the notes first.').waitFor();
    expect(await rig.button(/^Trim and/).isDisabled()).toBe(true);
    expect(await rig.button('I have checked every point at the rig').isDisabled()).toBe(true);
    await rig.confirmNotes();
  });

  it('with a code that the display does not show', async () => {
    const code = await rig.readCode();
    await rig.type('Code', code === '0000' ? '1111' : '0000');
    await rig.button(/^Trim and/).click();
    await isRefused(page, 'presence-wrong');
    await rig.isNow('ready');
  });

  it('while the guard is open, and the page says that it is', async () => {
    await touchRig(house.dataDir, RIG, { do: 'guard', open: true });
    await page.getByText('The guard is open. Nothing moves').waitFor();
    await rig.start();
    await isRefused(page, 'guard-open');
    await touchRig(house.dataDir, RIG, { do: 'guard', open: false });
    await rig.isNow('ready');
  });

  it('while another person works on the rig, whom the page names', async () => {
    const other = await desk('maintainer');
    const hands = await AtRig.open(other, RIG);
    await hands.button('I work on this rig').click();
    await other.getByText(`You work on ${RIG}`).waitFor();

    await page.getByText(/Tove Lindgaard works on Wren/).waitFor();
    expect(await rig.button('My hands and tools are out, end it').count()).toBe(0);
    await rig.start();
    await isRefused(page, 'work-hold');

    await hands.button('My hands and tools are out, end it').click();
    await rig.isNow('ready');
    await other.context().close();
  });

  it('while the tray holds the last run: the page asks to empty it and offers no start', async () => {
    await rig.start();
    await rig.isNow('held');
    await rig.button('Stop this run').click();
    await rig.button('Stop now').click();
    await rig.isNow('tray full');
    await page.getByText('Empty the tray and confirm the bag.').waitFor();
    expect(await rig.button(/^Trim and/).count()).toBe(0);
  });
});
