import { afterEach, describe, expect, it } from 'vitest';
import { giveLots } from '@/lib/services/dispatch/give-lots';
import { listLots } from '@/lib/services/lots/list-lots';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { addWire } from '@/lib/services/wires/add-wire';
import { hearRigs, lineOf, makeBatch } from '@/tests/support/batch-world';
import { exampleRigProfile } from '@/tests/support/example-rig';
import { type FloorWorld, goodReport, openFloorWorld, report } from '@/tests/support/floor-world';
import { listenForNews } from '@/tests/support/news';

let floor: FloorWorld;
afterEach(() => floor.close());

const dispatch = () => giveLots({ ctx: floor.system() });

async function lots() {
  return (await listLots({ ctx: await floor.as('operator'), input: {} })).lots;
}

async function reasons() {
  return (await lots()).filter(({ state }) => state === 'waiting').map(({ waitingReason }) => waitingReason);
}

describe('dispatch', () => {
  it('gives a lot to a rig that has its wire, with a run, a program and a command to take it', async () => {
    floor = await openFloorWorld();
    await hearRigs(floor);
    await makeBatch(floor, [lineOf(floor)]);
    const [gift] = await dispatch();
    const [lot] = await lots();
    expect(gift).toEqual({ lotId: lot?.id, rigId: floor.rigIds[0] });
    expect(lot).toMatchObject({ state: 'given', rigName: 'Rig 1', waitingReason: '', cut: 0, bagged: null });
    const runs = await floor.world.query('select state, pieces from runs where id = $1', [lot?.runId]);
    expect(runs).toEqual([{ state: 'prepared', pieces: 20 }]);
    const commands = await floor.world.query('select kind, rig_id from commands');
    expect(commands).toEqual([{ kind: 'take-program', rig_id: floor.rigIds[0] }]);
  });

  it('gives each rig one lot, by priority, then due time', async () => {
    floor = await openFloorWorld({ rigs: 2 });
    await hearRigs(floor);
    await makeBatch(floor, [lineOf(floor, { label: 'later' })]);
    await makeBatch(floor, [lineOf(floor, { label: 'due' })], { dueAt: '2026-12-01T12:00:00.000Z' });
    await makeBatch(floor, [lineOf(floor, { label: 'first' })], { priority: 1 });
    expect(await dispatch()).toHaveLength(2);
    const given = await floor.world.query<{ label: string }>(
      "select b.label from lots l join batch_lines b on b.id = l.line_id where l.state = 'given' order by 1",
    );
    expect(given.map(({ label }) => label)).toEqual(['due', 'first']);
    expect(await dispatch()).toEqual([]);
  });

  it('never gives one lot or one rig twice, however many dispatch at once (law 4)', async () => {
    floor = await openFloorWorld({ rigs: 3 });
    await hearRigs(floor);
    for (let index = 0; index < 6; index += 1) await makeBatch(floor, [lineOf(floor)]);
    const gifts = (await Promise.all(Array.from({ length: 8 }, dispatch))).flat();
    expect(gifts).toHaveLength(3);
    expect(new Set(gifts.map(({ lotId }) => lotId)).size).toBe(3);
    expect(new Set(gifts.map(({ rigId }) => rigId)).size).toBe(3);
    const [count] = await floor.world.query('select count(*)::int as runs from runs');
    expect(count).toEqual({ runs: 3 });
  });

  it('passes over a rig that somebody has in hand, and gives to it afterwards', async () => {
    floor = await openFloorWorld();
    await hearRigs(floor);
    await makeBatch(floor, [lineOf(floor)]);
    await floor.world.db.transaction(async (db) => {
      await db.execute('select 1 from rigs for update');
      expect(await dispatch()).toEqual([]);
    });
    expect(await dispatch()).toHaveLength(1);
  });

  it('gives nothing to a rig that is silent, on hold, out of service or still at work that was taken from it', async () => {
    floor = await openFloorWorld();
    const [rigId = ''] = floor.rigIds;
    await makeBatch(floor, [lineOf(floor)]);
    const has = 'Rig 1 has GN 30 AWG loaded but';
    await dispatch();
    expect(await reasons()).toEqual([`${has} is not heard.`]);
    await report(floor, goodReport(floor, rigId, { runner: 'cutting' }));
    await dispatch();
    expect(await reasons()).toEqual([`${has} its agent still holds earlier work.`]);
    await report(floor, goodReport(floor, rigId, { runner: 'idle', workHold: true }));
    await dispatch();
    expect(await reasons()).toEqual([`${has} somebody works on it.`]);
    await hearRigs(floor);
    await floor.world.query('update rigs set out_of_service_at = now()');
    await dispatch();
    expect(await reasons()).toEqual([`${has} is out of service.`]);
    await floor.world.query('update rigs set out_of_service_at = null');
    floor.clock.pass(8_001);
    await dispatch();
    expect(await reasons()).toEqual([`${has} is not heard.`]);
    await hearRigs(floor);
    expect(await dispatch()).toHaveLength(1);
  });

  it('says what is missing: the wire, enough of it, a rig that cuts the length', async () => {
    floor = await openFloorWorld();
    await hearRigs(floor);
    const other = {
      gaugeAwg: 30,
      conductor: 'copper',
      insulation: 'ETFE',
      colour: 'BU',
      outsideDiameterMm: 0.5,
    };
    const blue = await addWire({ ctx: await floor.as('owner'), input: other });
    const { longestPieceMm } = exampleRigProfile().feed;
    await makeBatch(floor, [
      lineOf(floor, { label: 'blue', wireId: blue.id }),
      lineOf(floor, { label: 'long', lengthMm: longestPieceMm + 1 }),
      lineOf(floor, { label: 'much', lengthMm: 100, pieces: 399 }),
    ]);
    await floor.world.query('update spools set used_mm = length_mm - 30000');
    await dispatch();
    expect(await reasons()).toEqual([
      'No rig has BU 30 AWG loaded.',
      `${longestPieceMm + 1} mm is too long: Rig 1 cuts at most ${longestPieceMm} mm.`,
      expect.stringMatching(
        /^Rig 1 has GN 30 AWG loaded, but 30\.0 m are left and this lot needs \d+\.\d m\.$/,
      ),
    ]);
  });

  it('gives to a rig once its spool is changed', async () => {
    floor = await openFloorWorld();
    await hearRigs(floor);
    const [rigId] = floor.rigIds;
    const [spool] = await floor.world.query<{ id: string }>('select id from spools');
    await loadSpool({ ctx: await floor.as('operator'), input: { rigId, spoolId: null } });
    await makeBatch(floor, [lineOf(floor)]);
    await dispatch();
    expect(await reasons()).toEqual(['No rig has GN 30 AWG loaded.']);
    await loadSpool({ ctx: await floor.as('operator'), input: { rigId, spoolId: spool?.id } });
    expect(await dispatch()).toHaveLength(1);
  });

  it('tells of a batch when its reason changes, and keeps quiet when it does not', async () => {
    floor = await openFloorWorld();
    const batchId = await makeBatch(floor, [lineOf(floor)]);
    const listener = await listenForNews(floor.world.url);
    await dispatch();
    expect(await listener.heard('batch')).toEqual([{ news: 'batch', batchId }]);
    await dispatch();
    expect(await listener.heard('batch')).toHaveLength(1);
    await listener.close();
  });

  it('is Ellwand’s own work and nobody else’s', async () => {
    floor = await openFloorWorld();
    await expect(giveLots({ ctx: await floor.as('owner') })).rejects.toMatchObject({ code: 'not-allowed' });
  });
});
