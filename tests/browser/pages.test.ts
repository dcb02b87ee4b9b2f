import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Role } from '@/lib/fleet/rights';
import { auditPage, RIG_PX } from '@/tests/support/browser-audit';
import { touchRig } from '@/tests/support/browser-control';
import { demoAccount, openDesk, openSignedIn } from '@/tests/support/browser-desk';
import { tabTo } from '@/tests/support/browser-keyboard';
import { openRelay } from '@/tests/support/browser-relay';
import { AtRig } from '@/tests/support/browser-rig';
import { openBrowser } from '@/tests/support/chromium';

const RIG = 'Linnet';
const house = inject('house');
let browser: Browser;

beforeAll(async () => {
  browser = await openBrowser();
});

afterAll(async () => {
  await browser.close();
});

function desk(role: Role): Promise<Page> {
  return openSignedIn(browser, house, demoAccount(role, house));
}

const atRig = { buttonPx: RIG_PX };

describe('at the rig', () => {
  let page: Page;
  let rig: AtRig;

  beforeAll(async () => {
    page = await desk('operator');
    await page.goto('/');
    await page.locator(`[data-rig="${RIG}"][data-state="ready"]`).waitFor();
  });

  afterAll(async () => {
    await page.context().close();
  });

  it('the floor can be read and pressed, by day and in the night shift', async () => {
    expect(await auditPage(page, 'floor')).toEqual([]);
    await page.emulateMedia({ colorScheme: 'dark' });
    expect(await auditPage(page, 'floor dark')).toEqual([]);
    await page.emulateMedia({ colorScheme: 'light' });
  });

  it('the whole start is done with the keyboard alone', async () => {
    await tabTo(page, { role: 'link', name: RIG });
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { level: 1, name: RIG }).waitFor();
    rig = await AtRig.open(page, RIG);
    expect(await auditPage(page, 'rig notes', atRig)).toEqual([]);

    await tabTo(page, { role: 'checkbox', name: /^I have read the full notes/ });
    await page.keyboard.press('Space');
    await tabTo(page, { role: 'button', name: 'I have checked every point at the rig' });
    await page.keyboard.press('Enter');
    await tabTo(page, { role: 'button', name: 'Show a code' });
    await page.keyboard.press('Enter');
    const code = await rig.codeOnDisplay();
    expect(await auditPage(page, 'rig code', atRig)).toEqual([]);
    await tabTo(page, { role: 'textbox', name: 'Type the code shown on the rig' });
    await page.keyboard.type(code);
    await tabTo(page, { role: 'button', name: /^Trim and cut/ });
    await page.keyboard.press('Enter');
    await rig.isNow('held');
  });

  it('first pieces, cutting, paused and an open guard can be read and pressed', async () => {
    await page.getByRole('heading', { name: 'Measure the first pieces' }).waitFor();
    expect(await auditPage(page, 'rig first pieces', atRig)).toEqual([]);
    await rig.measure('84.5');
    await rig.goOn();
    await rig.isNow('cutting');
    expect(await auditPage(page, 'rig cutting', atRig)).toEqual([]);
    await rig.button('Pause').click();
    await rig.isNow('paused');
    expect(await auditPage(page, 'rig paused', atRig)).toEqual([]);
    await page.emulateMedia({ colorScheme: 'dark' });
    expect(await auditPage(page, 'rig paused dark', atRig)).toEqual([]);
    await page.emulateMedia({ colorScheme: 'light' });
    await touchRig(house.dataDir, RIG, { do: 'guard', open: true });
    await page.getByText('The guard is open. Nothing moves').waitFor();
    expect(await auditPage(page, 'rig guard open', atRig)).toEqual([]);
    await touchRig(house.dataDir, RIG, { do: 'guard', open: false });
  });

  it('a full tray, its label and a work hold can be read and pressed', async () => {
    await rig.button('Stop this run').click();
    expect(await auditPage(page, 'rig stop asked', atRig)).toEqual([]);
    await rig.button('Stop now').click();
    await rig.isNow('tray full');
    await rig.button('Tray is empty, make the label').waitFor();
    expect(await auditPage(page, 'rig tray', atRig)).toEqual([]);
    await page.goto('/');
    await page.locator(`[data-rig="${RIG}"][data-state="tray full"]`).waitFor();
    expect(await auditPage(page, 'floor tray full')).toEqual([]);
    rig = await AtRig.open(page, RIG);
    await rig.button('Tray is empty, make the label').click();
    await page.getByRole('article', { name: /^Label of bag/ }).waitFor();
    expect(await auditPage(page, 'label', atRig)).toEqual([]);

    rig = await AtRig.open(page, RIG);
    await rig.button('I work on this rig').click();
    await page.getByText(`You work on ${RIG}`).waitFor();
    expect(await auditPage(page, 'rig work hold', atRig)).toEqual([]);
    await rig.button('My hands and tools are out, end it').click();
    await rig.isNow('ready');
  });

  it('a page whose link is lost can be read', async () => {
    const cable = await openRelay(house.url);
    const far = await openSignedIn(browser, cable, demoAccount('operator', house));
    await far.goto('/');
    await far.getByText('· live').waitFor();
    cable.cut();
    await far.getByText('The link to Ellwand is lost.').waitFor();
    expect(await auditPage(far, 'floor link lost')).toEqual([]);
    await far.context().close();
    await cable.close();
  });
});

describe('at a desk', () => {
  it('the sign-in can be read and pressed, also when it refuses', async () => {
    const page = await openDesk(browser, house);
    await page.goto('/sign-in');
    await page.getByRole('button', { name: 'Sign in' }).waitFor();
    expect(await auditPage(page, 'sign-in')).toEqual([]);
    await page.context().close();
  });

  it('every page of batches can be read and pressed', async () => {
    const page = await desk('scheduler');
    await page.goto('/batches?state=all');
    await page.getByRole('list', { name: 'Batches' }).waitFor();
    expect(await auditPage(page, 'batches')).toEqual([]);
    await page.getByRole('link', { name: 'Relay frame', exact: true }).click();
    await page.getByRole('list', { name: 'Lines' }).waitFor();
    expect(await auditPage(page, 'batch')).toEqual([]);
    await page.getByRole('button', { name: 'Withdraw it' }).click();
    await page.getByText('Withdraw Relay frame?').waitFor();
    expect(await auditPage(page, 'batch withdraw')).toEqual([]);
    await page.getByRole('link', { name: 'Change it' }).click();
    await page.getByRole('button', { name: 'Save the changes' }).waitFor();
    expect(await auditPage(page, 'batch change')).toEqual([]);
    await page.goto('/batches/new');
    await page.getByRole('button', { name: 'Save and queue it' }).click();
    await page.getByText('Something is missing.').waitFor();
    expect(await auditPage(page, 'batch new')).toEqual([]);
    await page.goto('/batches?search=nothing-is-called-so');
    await page.getByText('No batch is like that.').waitFor();
    expect(await auditPage(page, 'batches none')).toEqual([]);
    await page.context().close();
  });

  it('the upload can be read and pressed, with a good list and with a bad one', async () => {
    const page = await desk('scheduler');
    await page.goto('/batches/upload');
    const choice = page.getByLabel('Drop a cut list here, or choose one');
    await choice.waitFor();
    expect(await auditPage(page, 'upload')).toEqual([]);
    await page.getByRole('button', { name: 'Use the example' }).click();
    await page.getByText('All of it was understood.').waitFor();
    expect(await auditPage(page, 'upload understood')).toEqual([]);
    const text =
      'label,length_mm,pieces,gauge_awg,insulation,colour\nA1,long,4,30,ETFE,GN\nA2,50,-3,30,ETFE,ZZ\n';
    await choice.setInputFiles({ name: 'bad.csv', mimeType: 'text/csv', buffer: Buffer.from(text) });
    await page.getByText('bad.csv').waitFor();
    expect(await auditPage(page, 'upload problems')).toEqual([]);
    await page.context().close();
  });
});

describe('the set-up', () => {
  let page: Page;

  beforeAll(async () => {
    page = await desk('owner');
  });

  afterAll(async () => {
    await page.context().close();
  });

  it.each(['', '/wires', '/spools', '/blades', '/rigs', '/agents', '/people', '/workshop'])(
    'its page %s can be read and pressed, with all that it opens',
    async (path) => {
      await page.goto(`/setup${path}`);
      await page.getByRole('heading', { level: 1 }).waitFor();
      for (const summary of await page.locator('main summary').all()) await summary.click();
      expect(await auditPage(page, `setup${path.replace('/', ' ')}`)).toEqual([]);
    },
  );

  it('of one rig can be read and pressed, also with its refusals', async () => {
    await page.goto('/setup/rigs');
    await page.getByRole('link', { name: `Set up ${RIG}` }).click();
    await page.getByRole('heading', { level: 1, name: RIG }).waitFor();
    expect(await auditPage(page, 'setup rig')).toEqual([]);
    await page.getByLabel('Cut, mm').fill('');
    await page.getByRole('button', { name: 'Publish the profile' }).click();
    await page.getByRole('main').getByRole('alert').waitFor();
    expect(await auditPage(page, 'setup rig refused')).toEqual([]);
  });
});

it('the audit itself finds a field without a name, faint words, a low button and sideways scrolling', async () => {
  const page = await openDesk(browser, house);
  await page.setContent(
    '<main><input style="width:2000px"><button style="height:20px;color:#aaa;background:#fff">Go</button></main>',
  );
  const found = (await auditPage(page, 'broken')).join('\n');
  for (const what of ['label at input', 'color-contrast at button', 'target too small: BUTTON "Go"']) {
    expect(found).toContain(what);
  }
  expect(found).toContain('scrolls sideways');
  await page.context().close();
});
