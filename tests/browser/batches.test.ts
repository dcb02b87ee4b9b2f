import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { demoAccount, openSignedIn } from '@/tests/support/browser-desk';
import { openBrowser } from '@/tests/support/chromium';

const house = inject('house');
/** No demo rig has this wire loaded, so nothing of these batches is ever given to a rig of another test. */
const WIRE = /^BK .*26 AWG PVDF/;
const HEADER = 'label;length_mm;pieces;gauge_awg;insulation;colour';

let browser: Browser;
let page: Page;

beforeAll(async () => {
  browser = await openBrowser();
  page = await openSignedIn(browser, house, demoAccount('scheduler', house));
});
afterAll(() => browser.close());

function cutList(...lines: string[]) {
  return { name: 'panel-loom.csv', mimeType: 'text/csv', buffer: Buffer.from([HEADER, ...lines].join('\n')) };
}

async function choose(file: ReturnType<typeof cutList>): Promise<void> {
  await page.getByLabel('Drop a cut list here, or choose one').setInputFiles(file);
}

function rowsOf(caption: string) {
  return page.getByRole('table', { name: caption }).getByRole('row');
}

async function anotherLine(label: string, pieces: string): Promise<void> {
  const place = await page
    .getByRole('listitem')
    .filter({ has: page.getByLabel(/^Label, line/) })
    .count();
  await page.getByLabel(`Label, line ${place}`, { exact: true }).fill(label);
  await page.getByLabel(`Length, line ${place}`, { exact: true }).fill('2.5in');
  await page.getByLabel(`Pieces, line ${place}`, { exact: true }).fill(pieces);
}

describe('uploading a cut list', () => {
  it('shows each bad cell with row, column and what to write, and offers no way to save', async () => {
    await page.goto('/batches/upload');
    await choose(cutList('A1;63,5;40;30;ETFE;green', 'A2;long;40;26;PVDF;BK', 'A3;10;0;26;PVDF;BK'));
    await page.getByText('3 things to put right').waitFor();
    const told = await page.getByRole('alert').getByRole('row').allInnerTexts();
    expect(told.map((row) => row.split(/\s*\t\s*/))).toEqual([
      ['Row', 'Column', 'Found', 'Write instead'],
      ['2', 'colour', 'green', 'Write GN.'],
      ['3', 'length_mm', 'long', 'Write a number over 0, such as 63.5, 63,5 or 2.5in.'],
      ['4', 'pieces', '0', 'Write at least 1, or take the line out.'],
    ]);
    expect(await page.getByRole('button', { name: 'Save and queue it' }).count()).toBe(0);
  });

  it('shows the lines as understood before anything is saved, saves them, and tells the same file again', async () => {
    const file = cutList('A1;63,5;40;26;PVDF;BK', 'A2;2.5in;12;26;PVDF;BK');
    await choose(file);
    await page.getByText('2 lines, 52 pieces').waitFor();
    expect(await rowsOf('The lines as they were understood').nth(2).innerText()).toMatch(/A2.*12.*63\.5 mm/s);
    await page.getByLabel('Name').fill('Panel loom of a test');
    await page.getByRole('button', { name: 'Save as a draft' }).click();
    await page.getByRole('heading', { name: 'Panel loom of a test' }).waitFor();

    await page.goto('/batches/upload');
    await choose(file);
    await page.getByText('This very file was uploaded before.').waitFor();
    const save = page.getByRole('button', { name: 'Save as a draft' });
    expect(await save.isDisabled()).toBe(true);
    await page.getByLabel('I want it a second time').check();
    expect(await save.isDisabled()).toBe(false);
  });

  it('understands the example that it offers', async () => {
    await page.goto('/batches/upload');
    await page.getByRole('button', { name: 'Use the example' }).click();
    await page.getByText('40 lines, 712 pieces').waitFor();
    await page.getByText('All of it was understood.').waitFor();
  });
});

describe('a batch by hand', () => {
  it('is typed without a mouse, queued, says why it waits, and is withdrawn with what is cut in view', async () => {
    await page.goto('/batches/new');
    await page.getByLabel('Name').fill('Black leads of a test');
    const wire = await page.getByRole('option', { name: WIRE }).first().innerText();
    await page.getByLabel('Wire, line 1').selectOption({ label: wire });
    await anotherLine('A1', '12');
    await page.keyboard.press('Enter');
    await page.getByLabel('Label, line 2').waitFor();
    await anotherLine('A2', '');
    await page.keyboard.press('Control+Enter');
    await page.getByText('Pieces: Enter a whole number.').waitFor();
    await page.getByLabel('Pieces, line 2').fill('8');
    await page.keyboard.press('Control+Enter');

    await page.getByRole('heading', { name: 'Black leads of a test' }).waitFor();
    await page.getByText('No rig has BK 26 AWG loaded.').first().waitFor();
    await page.getByRole('button', { name: 'Withdraw it' }).click();
    await page.getByText('Nothing of it is cut yet.').waitFor();
    await page.getByText('20 pieces would not be cut any more.').waitFor();
    await page.getByRole('button', { name: 'Withdraw what is not cut' }).click();
    await page.getByText('20 pieces will not be cut.').waitFor();
    await page.getByText('Withdrawn.', { exact: true }).first().waitFor();
  });
});

describe('the list of batches', () => {
  it('keeps search and filters in the address, so that a link shows the same', async () => {
    await page.goto('/batches');
    await page.getByLabel('State').selectOption('all');
    await page.getByLabel('Search').fill('black leads');
    await page.waitForURL((url) => url.searchParams.get('search') === 'black leads');
    await page.getByRole('link', { name: 'Black leads of a test' }).waitFor();
    expect(new URL(page.url()).searchParams.get('state')).toBe('all');
    await page.goto(page.url());
    await page.getByRole('list', { name: 'Batches' }).waitFor();
    expect(await page.getByRole('list', { name: 'Batches' }).locator('> li').count()).toBe(1);
    await page.getByLabel('State').selectOption('done');
    await page.getByText('No batch is like that.').waitFor();
  });

  it('shows a batch that somebody else queues without a reload', async () => {
    await page.goto('/batches?sort=number&descending=true');
    await page.getByRole('list', { name: 'Batches' }).waitFor();
    const other = await openSignedIn(browser, house, demoAccount('owner', house));
    await other.goto('/batches/upload');
    await other
      .getByLabel('Drop a cut list here, or choose one')
      .setInputFiles(cutList('L1;50;3;26;PVDF;BK'));
    await other.getByLabel('Name').fill('Seen at once');
    await other.getByRole('button', { name: 'Save and queue it' }).click();
    await page.getByRole('link', { name: 'Seen at once' }).waitFor();
    await other.context().close();
  });
});
