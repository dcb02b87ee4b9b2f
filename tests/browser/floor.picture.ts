import { fileURLToPath } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { touchRig } from '@/tests/support/browser-control';
import { AT_A_DESK, demoAccount, openSignedIn } from '@/tests/support/browser-desk';
import { AtRig } from '@/tests/support/browser-rig';
import { openBrowser } from '@/tests/support/chromium';
import { startTestHouse, type TestHouse } from '@/tests/support/house';

const PICTURE = fileURLToPath(new URL('../../public/floor.png', import.meta.url));
/** Slow enough that no lot ends before the picture is taken. */
const RIG_SPEED = 3;
/** Rigs that go on after their first pieces, with a length within tolerance. */
const CUTTING = { Wren: '140.9', Curlew: '63.9', Linnet: '84.5', Plover: '112.7', Siskin: '84.5' };

/** The README's picture of the floor. It changes a file of the repository, so it is taken only when it is asked for. */
describe('the picture of the floor', () => {
  let house: TestHouse;
  let browser: Browser;
  let page: Page;

  beforeAll(async () => {
    house = await startTestHouse({ demo: true, rigSpeed: RIG_SPEED });
    browser = await openBrowser();
    const account = demoAccount('operator', { password: house.accounts?.password ?? '' });
    page = await openSignedIn(browser, { url: house.url, size: AT_A_DESK }, account);
  });

  afterAll(async () => {
    await browser?.close();
    await house?.stop();
  });

  async function startRig(name: string): Promise<AtRig> {
    await page.goto('/');
    await page.locator(`[data-rig="${name}"][data-state="ready"]`).waitFor();
    const rig = await AtRig.open(page, name);
    await rig.confirmNotes();
    await rig.start();
    return rig;
  }

  it('shows rigs cutting, one held with its first pieces, one with its guard open', async () => {
    for (const [name, lengthMm] of Object.entries(CUTTING)) {
      const rig = await startRig(name);
      await rig.measure(lengthMm);
      await rig.goOn();
      await rig.isNow('cutting');
    }
    const held = await startRig('Knot');
    await held.isNow('held');
    await touchRig(house.dataDir, 'Curlew', { do: 'guard', open: true });
    await page.goto('/');
    await page.locator('[data-rig="Curlew"][data-state="blocked"]').waitFor();
    expect(await page.locator('[data-rig][data-state="cutting"]').count()).toBeGreaterThan(2);
    await page.screenshot({ path: PICTURE });
  });
});
