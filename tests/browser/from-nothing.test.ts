import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { createVirtualRig, type VirtualRig } from '@/agent/virtual/rig';
import { repo } from '@/scripts/house/repo.mjs';
import { AT_A_DESK, AT_THE_RIG, openDesk, signInByPage } from '@/tests/support/browser-desk';
import { AtRig } from '@/tests/support/browser-rig';
import { openBrowser } from '@/tests/support/chromium';
import { startTestHouse, type TestHouse } from '@/tests/support/house';

const RIG = 'Heron';
const OPERATOR = { email: 'otto@test.example', password: 'wrap seven turns' };
/** Numbers that fit the virtual rig as it is when nothing is said about it. */
const PROFILE: Record<string, string> = {
  'Home, mm': '5',
  'Standby, mm': '4',
  'Cut, mm': '0,8',
  'Park, mm': '7',
  'Lowest, mm': '0',
  'Highest, mm': '20',
  'Speed, mm/s': '25',
  'Steps per mm': '100',
  'Feed units for 1 mm of wire': '1',
  'Speed, mm of wire per s': '50',
  'Longest move, mm': '120',
  'Shortest piece, mm': '12',
  'Longest piece, mm': '2000',
  'Trim, mm': '15',
  'Steppers stay on in a pause, s': '120',
  'Guard’s end stop': 'x_max',
  'Why this version': 'First set-up.',
};
const FITTED = ['Hardware stop', 'Wire switch', 'Display', 'Beeper', 'Heater thermistor', 'Emergency parser'];

let house: TestHouse;
let browser: Browser;
let page: Page;
let folder: string;
let rig: VirtualRig;
let agent: ChildProcess | undefined;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'ellwand-nothing-'));
  rig = createVirtualRig({ name: RIG, tty: join(folder, 'tty'), speed: 8 });
  await rig.start();
  [house, browser] = await Promise.all([startTestHouse({ demo: false }), openBrowser()]);
  page = await openDesk(browser, { url: house.url, size: AT_A_DESK });
});

afterAll(async () => {
  await browser?.close();
  if (agent?.exitCode === null) {
    agent.kill('SIGTERM');
    await once(agent, 'exit');
  }
  await rig?.stop();
  await house?.stop();
  rmSync(folder, { recursive: true, force: true });
});

/** Fills fields by their labels. */
async function fill(fields: Record<string, string>): Promise<void> {
  for (const [label, text] of Object.entries(fields))
    await page.getByLabel(label, { exact: true }).fill(text);
}

async function openArea(title: string): Promise<void> {
  await page.getByRole('navigation', { name: 'Set-up' }).getByRole('link', { name: title }).click();
  await page.getByRole('heading', { level: 1, name: title }).waitFor();
}

/** Presses a button of the set-up and waits for what it then says. */
async function press(button: string, said: string): Promise<void> {
  await page.getByRole('button', { name: button, exact: true }).click();
  await page.getByRole('status').filter({ hasText: said }).waitFor();
}

async function addStock(): Promise<void> {
  await openArea('Wires');
  await fill({ 'Gauge, AWG': '30', Colour: 'GN', Insulation: 'ETFE', Conductor: 'copper' });
  await page.getByRole('button', { name: 'Add', exact: true }).click();
  await page.getByRole('link', { name: 'Outside diameter, mm' }).waitFor();
  await fill({ 'Outside diameter, mm': '0,5' });
  await press('Add', 'Added.');
  await openArea('Spools');
  await fill({ Label: 'S-1', 'Wire on it, in metres': '100', 'Where it is kept': 'shelf' });
  await page.getByLabel('Wire', { exact: true }).selectOption({ label: 'GN green, 30 AWG ETFE' });
  await press('Add', 'Added.');
  await openArea('Blades');
  await fill({ Label: 'B-1', Model: 'side cutter' });
  await press('Add', 'Added.');
}

async function addRig(): Promise<void> {
  await openArea('Rigs');
  await fill({ Name: RIG, Bay: 'bay 1' });
  await page.getByRole('button', { name: 'Add and set up' }).click();
  await page.getByText('Still needs a profile, interlock notes, an agent, a spool.').waitFor();
  await fill(PROFILE);
  await page.getByLabel('Acceleration, mm/s²').first().fill('500');
  await page.getByLabel('Acceleration, mm/s²').last().fill('800');
  await page.getByLabel('Guard switch').selectOption('TRIGGERED');
  for (const part of FITTED) await page.getByLabel(part).check();
  await page.getByRole('button', { name: 'Publish the profile' }).click();
  await page.getByRole('heading', { name: 'Profile, version 1' }).waitFor();
  await fill({
    'Before anything moves': 'Guard shut.\nHands clear of the jaws.',
    'Full notes': 'Local rules come first. Eye protection on, the hardware stop in reach and tried today.',
  });
  await page.getByRole('button', { name: 'Publish the notes' }).click();
  await page.getByRole('heading', { name: 'Interlock notes, version 1' }).waitFor();
  await page.getByLabel('The spool on this rig').selectOption({ label: 'S-1, GN 30 AWG' });
  await page.getByRole('button', { name: 'It hangs and is threaded' }).click();
  await page.getByText('Still needs an agent.').waitFor();
  await page.getByLabel('The blade in this rig').selectOption({ label: 'B-1, side cutter' });
  await page.getByRole('button', { name: 'It is fitted' }).click();
  await page.getByText('B-1, side cutter, 0 cuts.').waitFor();
}

async function pairAgent(): Promise<void> {
  await openArea('Agents');
  await fill({ Name: 'Bench computer' });
  await page.getByLabel(RIG).check();
  await page.getByRole('button', { name: 'Add and show the code' }).click();
  const offer = page.getByRole('region', { name: 'Pairing code of Bench computer' });
  const pairingCode = await offer.locator('output').innerText();
  const config = join(folder, 'agent.json');
  const rigs = [{ rig: RIG, port: join(folder, 'tty') }];
  const dataDir = join(folder, 'agent');
  writeFileSync(config, JSON.stringify({ server: house.url, dataDir, pairingCode, rigs }));
  agent = spawn(process.execPath, ['scripts/run.mjs', 'agent/main.ts', '--config', config], {
    cwd: repo,
    stdio: 'ignore',
  });
  await expect
    .poll(
      async () => {
        await page.reload();
        return page.getByText('Paired, heard').count();
      },
      { timeout: 60_000, interval: 1_000 },
    )
    .toBe(1);
}

async function addOperator(): Promise<void> {
  await openArea('People');
  await fill({ Name: 'Otto', 'E-mail': OPERATOR.email, 'First password': OPERATOR.password });
  await page
    .getByRole('checkbox', { name: /^operator/ })
    .first()
    .check();
  await press('Add', 'Added.');
  await page.getByText(OPERATOR.email).waitFor();
}

async function queueBatch(): Promise<void> {
  await page.goto('/batches/new');
  await fill({
    Name: 'First',
    'Label, line 1': 'first',
    'Length, line 1': '60',
    'Pieces, line 1': '6',
  });
  await page.getByLabel('Wire, line 1').selectOption({ label: 'GN green, 30 AWG ETFE' });
  await page.getByRole('button', { name: 'Save and queue it' }).click();
  await page.getByText(`Open ${RIG}`).waitFor();
}

it('makes an empty workshop cut its first counted piece, by the app alone', async () => {
  await page.goto('/');
  await page.waitForURL((url) => url.pathname === '/first-owner');
  await fill({ 'Name of the workshop': 'Attic', 'Your name': 'Ada', 'Your e-mail': 'ada@test.example' });
  await fill({ 'Your password': 'brass and bronze' });
  await page.getByRole('button', { name: 'Begin' }).click();
  await page.waitForURL((url) => url.pathname === '/setup');
  await page.getByRole('heading', { level: 1, name: 'Attic' }).waitFor();
  await addStock();
  await addRig();
  await pairAgent();
  await addOperator();
  await queueBatch();

  const operator = await openDesk(browser, { url: house.url, size: AT_THE_RIG });
  await signInByPage(operator, OPERATOR);
  const bench = await AtRig.open(operator, RIG);
  await bench.isNow('ready');
  await bench.confirmNotes();
  await bench.start();
  await bench.hasCounted(1);
});

it('has no second first owner', async () => {
  const other = await openDesk(browser, { url: house.url });
  await other.goto('/first-owner');
  await other.waitForURL((url) => url.pathname === '/sign-in');
  await other.context().close();
});
