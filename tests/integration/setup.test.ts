import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addBlade } from '@/lib/services/blades/add-blade';
import { fitBlade } from '@/lib/services/blades/fit-blade';
import { listBlades } from '@/lib/services/blades/list-blades';
import { removeBlade } from '@/lib/services/blades/remove-blade';
import { addRig } from '@/lib/services/rigs/add-rig';
import { listRigsForSetup } from '@/lib/services/rigs/list-rigs-for-setup';
import { publishNotes } from '@/lib/services/rigs/publish-notes';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { readRigSetup } from '@/lib/services/rigs/read-rig-setup';
import { returnToService } from '@/lib/services/rigs/return-to-service';
import { takeOutOfService } from '@/lib/services/rigs/take-out-of-service';
import { addSpool } from '@/lib/services/spools/add-spool';
import { endSpool } from '@/lib/services/spools/end-spool';
import { listSpools } from '@/lib/services/spools/list-spools';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { addWire } from '@/lib/services/wires/add-wire';
import { listWires } from '@/lib/services/wires/list-wires';
import { changeWorkshop } from '@/lib/services/workshop/change-workshop';
import { readWorkshop, WORKSHOP_DEFAULTS } from '@/lib/services/workshop/read-workshop';
import { exampleRigProfile } from '@/tests/support/example-rig';
import { listenForNews } from '@/tests/support/news';
import { openWorld, type World } from '@/tests/support/setup-world';

let world: World;
beforeAll(async () => {
  world = await openWorld();
});
afterAll(() => world.close());

const code = (code: string) => expect.objectContaining({ code }) as unknown;
const problems = (...paths: string[]) => ({ code: 'bad-input', fields: paths.map((path) => ({ path })) });
const wire = (colour: string) => ({
  gaugeAwg: 30,
  conductor: 'copper',
  insulation: 'etfe',
  colour,
  outsideDiameterMm: 0.5,
});
let rigs = 0;
const newRig = async () => {
  rigs += 1;
  return (await addRig({ ctx: await world.as('owner'), input: { name: `Rig ${rigs}`, benchOrder: rigs } }))
    .id;
};
let labels = 0;
const newSpool = async (colour = 'GN') => {
  labels += 1;
  const ctx = await world.as('maintainer');
  const known = (await listWires({ ctx })).find((one) => one.colour === colour);
  const { id: wireId } = known ?? (await addWire({ ctx, input: wire(colour) }));
  return addSpool({ ctx, input: { label: `S-${labels}`, wireId, lengthMm: 100_000 } });
};

describe('wires', () => {
  it('are kept in the standard’s order of colours, once each', async () => {
    const ctx = await world.as('scheduler');
    expect(await addWire({ ctx, input: wire('bu/rd') })).toMatchObject({
      colour: 'RDBU',
      insulation: 'ETFE',
    });
    await expect(addWire({ ctx, input: wire('RDBU') })).rejects.toEqual(code('already-exists'));
  });

  it.each([
    [{ gaugeAwg: 19 }, 'gaugeAwg'],
    [{ gaugeAwg: 41 }, 'gaugeAwg'],
    [{ gaugeAwg: 30.5 }, 'gaugeAwg'],
    [{ colour: 'green' }, 'colour'],
    [{ outsideDiameterMm: 0 }, 'outsideDiameterMm'],
  ])('are refused with %j', async (wrong, path) => {
    const input = { ...wire('WH'), ...wrong };
    await expect(addWire({ ctx: await world.as('scheduler'), input })).rejects.toMatchObject(problems(path));
  });
});

describe('a spool', () => {
  it('is on one rig only, and the change wakes dispatch and the floor', async () => {
    const ctx = await world.as('operator');
    const [one, two, spool] = [await newRig(), await newRig(), await newSpool()];
    const listener = await listenForNews(world.url);
    await loadSpool({ ctx, input: { rigId: one, spoolId: spool.id } });
    expect(await listener.heard('rig')).toEqual([{ news: 'rig', rigId: one }]);
    expect(await listener.heard('outbox')).toHaveLength(1);
    await listener.close();
    const twice = loadSpool({ ctx, input: { rigId: two, spoolId: spool.id } });
    await expect(twice).rejects.toMatchObject({ code: 'illegal-step', fields: [{ path: 'spoolId' }] });
    await loadSpool({ ctx, input: { rigId: one, spoolId: null } });
    await loadSpool({ ctx, input: { rigId: two, spoolId: spool.id } });
    const listed = (await listSpools({ ctx })).find(({ id }) => id === spool.id);
    expect(listed).toMatchObject({ leftMm: 100_000, rigName: 'Rig 2' });
  });

  it('goes to one of two rigs when two people load it at once', async () => {
    const ctx = await world.as('operator');
    const [one, two, spool] = [await newRig(), await newRig(), await newSpool()];
    const load = (rigId: string) => loadSpool({ ctx, input: { rigId, spoolId: spool.id } });
    const results = await Promise.allSettled([load(one), load(two)]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });

  it('ends only off the rig, and is not loaded again', async () => {
    const ctx = await world.as('operator');
    const [rigId, spool] = [await newRig(), await newSpool()];
    await loadSpool({ ctx, input: { rigId, spoolId: spool.id } });
    await expect(endSpool({ ctx, input: { spoolId: spool.id } })).rejects.toEqual(code('illegal-step'));
    await loadSpool({ ctx, input: { rigId, spoolId: null } });
    await endSpool({ ctx, input: { spoolId: spool.id } });
    expect((await listSpools({ ctx })).map(({ id }) => id)).not.toContain(spool.id);
    await expect(loadSpool({ ctx, input: { rigId, spoolId: spool.id } })).rejects.toEqual(
      code('illegal-step'),
    );
  });
});

describe('a blade', () => {
  it('is fitted once, one to a rig, and does not come back', async () => {
    const ctx = await world.as('maintainer');
    const rigId = await newRig();
    const [first, second] = [
      await addBlade({ ctx, input: { label: 'B-1', model: 'flush' } }),
      await addBlade({ ctx, input: { label: 'B-2', model: 'flush' } }),
    ];
    await fitBlade({ ctx, input: { bladeId: first.id, rigId } });
    await expect(fitBlade({ ctx, input: { bladeId: second.id, rigId } })).rejects.toEqual(
      code('illegal-step'),
    );
    await removeBlade({ ctx, input: { bladeId: first.id, reason: 'nicked' } });
    await fitBlade({ ctx, input: { bladeId: second.id, rigId } });
    await expect(fitBlade({ ctx, input: { bladeId: first.id, rigId: await newRig() } })).rejects.toEqual(
      code('not-found'),
    );
    expect((await listBlades({ ctx })).map(({ label }) => label)).toEqual(['B-2']);
  });
});

describe('a rig', () => {
  it('has its newest profile in force and keeps the older ones with their reasons', async () => {
    const ctx = await world.as('maintainer');
    const rigId = await newRig();
    const profile = exampleRigProfile();
    await publishProfile({ ctx, input: { rigId, profile, reason: 'first' } });
    profile.feed.feedPerMm = 1.044;
    const second = await publishProfile({ ctx, input: { rigId, profile, reason: 'measured' } });
    expect(second.version).toBe(2);
    const read = await readRigSetup({ ctx, input: { rigId } });
    expect(read.profile?.feed.feedPerMm).toBe(1.044);
    expect(read.profileHistory.map(({ version, reason }) => [version, reason])).toEqual([
      [2, 'measured'],
      [1, 'first'],
    ]);
  });

  it('refuses a profile that would leave its own limits, and says where', async () => {
    const profile = exampleRigProfile();
    profile.cutAxis.parkMm = profile.cutAxis.highestMm + 0.001;
    profile.registerAxis = profile.cutAxis.axis;
    const input = { rigId: await newRig(), profile, reason: 'wrong' };
    await expect(publishProfile({ ctx: await world.as('maintainer'), input })).rejects.toMatchObject(
      problems('profile.cutAxis.parkMm', 'profile.registerAxis'),
    );
  });

  it('has notes whose version goes up, also when two people publish at once', async () => {
    const ctx = await world.as('maintainer');
    const rigId = await newRig();
    const input = { rigId, points: ['Guard shut.'], fullText: 'Eye protection on. '.repeat(3) };
    const versions = await Promise.all([publishNotes({ ctx, input }), publishNotes({ ctx, input })]);
    expect(versions.map(({ version }) => version).sort()).toEqual([1, 2]);
    const [row] = await listRigsForSetup({ ctx, rigId });
    expect(row).toMatchObject({ notesVersion: 2, profileVersion: null });
  });

  it('goes out of service with a reason, and back, each once', async () => {
    const ctx = await world.as('maintainer');
    const rigId = await newRig();
    await takeOutOfService({ ctx, input: { rigId, reason: 'belt torn' } });
    const again = takeOutOfService({ ctx, input: { rigId, reason: 'belt torn' } });
    await expect(again).rejects.toEqual(code('illegal-step'));
    const [row] = await listRigsForSetup({ ctx, rigId });
    expect(row?.outOfServiceReason).toBe('belt torn');
    await returnToService({ ctx, input: { rigId } });
    await expect(returnToService({ ctx, input: { rigId } })).rejects.toEqual(code('illegal-step'));
  });

  it.each(['', 'a'.repeat(25), '; M112', '-x'])('may not be called %j', async (name) => {
    const input = { name, benchOrder: 1 };
    await expect(addRig({ ctx: await world.as('owner'), input })).rejects.toMatchObject({
      code: 'bad-input',
      fields: expect.arrayContaining([expect.objectContaining({ path: 'name' })]) as unknown,
    });
  });
});

describe('the workshop', () => {
  it('has settings before anybody chose any, and only an owner chooses', async () => {
    expect(await readWorkshop({ ctx: world.system() })).toEqual({ ...WORKSHOP_DEFAULTS, name: 'Test' });
    const settings = { ...WORKSHOP_DEFAULTS, shiftStarts: ['13:30', '05:30', '05:30'], firstPieces: 3 };
    await expect(changeWorkshop({ ctx: await world.as('maintainer'), input: settings })).rejects.toEqual(
      code('not-allowed'),
    );
    await changeWorkshop({ ctx: await world.as('owner'), input: settings });
    const read = await readWorkshop({ ctx: world.system() });
    expect(read).toMatchObject({ shiftStarts: ['05:30', '13:30'], firstPieces: 3 });
  });

  it.each([
    [{ timeZone: 'Europe/Nowhere' }, 'timeZone'],
    [{ shiftStarts: ['24:00'] }, 'shiftStarts.0'],
    [{ lotPiecesMost: 10_000 }, 'lotPiecesMost'],
  ])('refuses %j', async (wrong, path) => {
    const input = { ...WORKSHOP_DEFAULTS, ...wrong };
    await expect(changeWorkshop({ ctx: await world.as('owner'), input })).rejects.toMatchObject(
      problems(path),
    );
  });
});

describe('rights', () => {
  it.each([
    ['operator', addWire],
    ['operator', addBlade],
    ['operator', fitBlade],
    ['scheduler', removeBlade],
    ['scheduler', publishProfile],
    ['scheduler', publishNotes],
    ['scheduler', loadSpool],
    ['scheduler', takeOutOfService],
    ['operator', returnToService],
    ['maintainer', addRig],
    ['maintainer', changeWorkshop],
  ] as const)('an %s is refused by %o before anything is read', async (role, verb) => {
    const ctx = await world.as(role);
    await expect(verb({ ctx, input: {} })).rejects.toEqual(code('not-allowed'));
  });

  it('everything that was done is in the audit, with who did it', async () => {
    const verbs = await world.query<{ verb: string }>(
      'select distinct verb from audit_entries where person_id is not null',
    );
    expect(verbs.map(({ verb }) => verb).sort()).toEqual([
      'blade.add',
      'blade.fit',
      'blade.remove',
      'notes.publish',
      'person.add',
      'person.first-owner',
      'profile.publish',
      'rig.add',
      'rig.in-service',
      'rig.out-of-service',
      'spool.add',
      'spool.end',
      'spool.load',
      'wire.add',
      'workshop.change',
    ]);
  });
});
