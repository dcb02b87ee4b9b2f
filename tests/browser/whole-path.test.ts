import { fileURLToPath } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, inject, it } from 'vitest';
import { AT_THE_RIG, demoAccount, openDesk, signInByPage } from '@/tests/support/browser-desk';
import { AtRig } from '@/tests/support/browser-rig';
import { cutOffMm } from '@/tests/support/browser-tally';
import { openBrowser } from '@/tests/support/chromium';

const EXAMPLE = fileURLToPath(new URL('../../public/examples/larch-counter.csv', import.meta.url));
const EXAMPLE_LINES = 40;
/** The line of the example that goes to Dunlin, which has white wire loaded. */
const RIG = 'Dunlin';
const LOT = 'Larch counter, BUS1, lot 1';
const PIECES = 24;
const LENGTH_MM = 50.8;
const house = inject('house');
let browser: Browser;
let scheduler: Page;
let operator: Page;

beforeAll(async () => {
  browser = await openBrowser();
  scheduler = await openDesk(browser, house);
  operator = await openDesk(browser, { ...house, size: AT_THE_RIG });
});

afterAll(async () => {
  await browser.close();
});

it('a scheduler signs in and withdraws a batch that nobody has begun', async () => {
  await signInByPage(scheduler, demoAccount('scheduler', house));
  await scheduler.getByRole('link', { name: 'Batches', exact: true }).click();
  await scheduler.getByRole('link', { name: 'Bench spares', exact: true }).click();
  await scheduler.getByRole('button', { name: 'Withdraw it' }).click();
  await scheduler.getByText('Nothing of it is cut yet.').waitFor();
  await scheduler.getByRole('button', { name: 'Withdraw what is not cut' }).click();
  await scheduler.getByText('650 pieces will not be cut. 0 pieces are cut.').waitFor();
});

it('uploads the shipped example, sees every line as it was understood, and queues it', async () => {
  await scheduler.goto('/batches/upload');
  await scheduler.getByLabel('Drop a cut list here, or choose one').setInputFiles(EXAMPLE);
  await scheduler.getByText('All of it was understood.').waitFor();
  const rows = scheduler.getByRole('table').locator('tbody').getByRole('row');
  expect(await rows.count()).toBe(EXAMPLE_LINES);
  const said = await rows.filter({ hasText: 'ADR6' }).textContent();
  expect(said).toContain('30 AWG');
  expect(said).toContain('152.4 mm');
  expect(said).toContain('−0 / +5 mm');

  await scheduler.getByLabel('Priority').selectOption({ index: 0 });
  await scheduler.getByRole('button', { name: 'Save and queue it' }).click();
  await scheduler.getByRole('heading', { level: 1, name: 'Larch counter' }).waitFor();
});

it('an operator sees on the floor which rig is ready with it', async () => {
  await signInByPage(operator, demoAccount('operator', house));
  const head = operator.getByRole('region', { name: 'What is to be done' });
  await head.getByRole('heading', { level: 1, name: /rigs? needs? somebody\..* cutting\./ }).waitFor();
  await head.getByRole('link', { name: `${RIG} ${LOT} is ready to start` }).click();
  await operator.getByRole('heading', { level: 1, name: RIG }).waitFor();
  await operator.getByRole('heading', { level: 2, name: LOT }).waitFor();
});

it('reads the notes in full, proves presence, and sees every count rise to the last piece without a reload', async () => {
  const rig = await AtRig.open(operator, RIG);
  await operator.getByText('These notes do not replace your local rules').waitFor();
  await rig.confirmNotes();
  await rig.watchCounts();
  const before = cutOffMm(house.dataDir, RIG).length;
  await rig.start();
  await operator.getByRole('heading', { name: 'Measure the first pieces' }).waitFor();
  await rig.measure('51.1');
  await rig.goOn();
  await rig.isNow('tray full');

  const seen = await rig.countsSeen();
  expect(seen).toEqual([...seen].sort((a, b) => a - b));
  expect(seen.length).toBeGreaterThan(PIECES / 2);
  const cutMm = cutOffMm(house.dataDir, RIG).slice(before);
  expect(cutMm.filter((mm) => Math.abs(mm - LENGTH_MM) < 1).length).toBe(PIECES);
});

it('empties the tray with one scrap and one sample, and gets a label with the count that is in the bag', async () => {
  const rig = await AtRig.open(operator, RIG);
  await operator.getByLabel(/^More scrap/).click();
  await rig.type('Pieces', '1');
  await operator.getByLabel(/^Kept as samples/).click();
  await rig.type('Pieces', '1');
  await operator.getByText(`${PIECES} cut − 1 scrap − 1 samples − 0 in doubt`).waitFor();
  await rig.button('Tray is empty, make the label').click();

  const label = operator.getByRole('article', { name: /^Label of bag EW-/ });
  await label.waitFor();
  const words = await label.textContent();
  expect(words).toContain(`${PIECES - 2} × ${LENGTH_MM} mm`);
  for (const part of ['Larch counter', 'BUS1', RIG, 'B-0102', 'S-0402', 'Ines Radauer']) {
    expect(words).toContain(part);
  }
  expect(await label.locator('svg path').count()).toBeGreaterThan(0);
});

it('the rig is ready again with the next lot, and the scheduler saw it all without a reload', async () => {
  const rig = await AtRig.open(operator, RIG);
  await rig.isNow('ready');
  await operator.getByRole('heading', { level: 2, name: /^Larch counter, BUS1, lot 2$/ }).waitFor();
  await operator.getByText(/The last bag, Larch counter/).waitFor();
  await scheduler.getByText(`${PIECES} of`).first().waitFor();
  await scheduler
    .getByText(`${PIECES - 2} in bags`)
    .first()
    .waitFor();
});
