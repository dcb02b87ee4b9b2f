import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addPerson } from '@/lib/services/people/add-person';
import { changeRoles } from '@/lib/services/people/change-roles';
import { createFirstOwner } from '@/lib/services/people/create-first-owner';
import { disablePerson } from '@/lib/services/people/disable-person';
import { enablePerson } from '@/lib/services/people/enable-person';
import { findSessionActor } from '@/lib/services/people/find-session-actor';
import { listPeople } from '@/lib/services/people/list-people';
import { setPassword } from '@/lib/services/people/set-password';
import { verifySignIn } from '@/lib/services/people/verify-sign-in';
import { openTestDatabase } from '@/tests/support/database';
import { listenForNews } from '@/tests/support/news';
import { NOW, openWorld, PASSWORD, type World } from '@/tests/support/setup-world';
import { drizzle } from 'drizzle-orm/node-postgres';

let world: World;
beforeAll(async () => {
  world = await openWorld();
});
afterAll(() => world.close());

const signIn = (email: string, password = PASSWORD, options: { at?: Date; address?: string } = {}) =>
  verifySignIn({
    ctx: world.system(options.at ?? NOW),
    input: { email, password },
    address: options.address ?? `address of ${email}`,
  });
const code = (code: string) => expect.objectContaining({ code }) as unknown;
const session = (personId: string, epoch: number) =>
  findSessionActor({ db: world.db, session: { personId, epoch } });

describe('the first owner', () => {
  it('is made once, also when several ask at the same time', async () => {
    const empty = await openTestDatabase();
    const db = drizzle(empty.pool, { casing: 'snake_case' });
    const ask = (index: number) =>
      createFirstOwner({
        ctx: { actor: { kind: 'system' }, db, now: NOW, requestId: 'test' },
        input: { workshopName: 'W', name: `N${index}`, email: `n${index}@x.example`, password: PASSWORD },
      });
    const results = await Promise.allSettled([1, 2, 3, 4, 5].map(ask));
    await empty.close();
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(results.find(({ status }) => status === 'rejected')).toMatchObject({
      reason: { code: 'workshop-not-empty' },
    });
  });

  it('is told of every field that is wrong', async () => {
    const input = { workshopName: ' ', name: '', email: 'nobody', password: 'too short' };
    await expect(createFirstOwner({ ctx: world.system(), input })).rejects.toMatchObject({
      code: 'bad-input',
      fields: ['workshopName', 'name', 'email', 'password'].map((path) => ({ path })),
    });
  });
});

describe('signing in', () => {
  it('takes the e-mail in any case, and stores no password', async () => {
    await world.as('operator');
    expect(await signIn('Operator@Test.example ')).toMatchObject({ name: 'operator', sessionEpoch: 1 });
    const [row] = await world.query<{ hash: string }>('select password_hash as hash from people limit 1');
    expect(row?.hash).toMatch(/^\$argon2id\$/);
  });

  it('refuses a wrong password, an unknown and a disabled account with one and the same code', async () => {
    const owner = await world.as('owner');
    const gone = await addPerson({
      ctx: owner,
      input: { name: 'Gone', email: 'gone@test.example', roles: ['operator'], password: PASSWORD },
    });
    await disablePerson({ ctx: owner, input: { personId: gone.id } });
    await expect(signIn('operator@test.example', 'wrong')).rejects.toEqual(code('sign-in-refused'));
    await expect(signIn('nobody@test.example')).rejects.toEqual(code('sign-in-refused'));
    await expect(signIn('gone@test.example')).rejects.toEqual(code('sign-in-refused'));
  });

  it('takes no more than five attempts on an account, however many come at once, until ten minutes are over', async () => {
    const email = 'scheduler@test.example';
    await world.as('scheduler');
    const guesses = Array.from({ length: 12 }, (_, index) =>
      signIn(email, `guess ${index}`, { address: `a${index}` }),
    );
    const codes = (await Promise.allSettled(guesses)).map((result) =>
      result.status === 'rejected' ? (result.reason as { code: string }).code : 'let in',
    );
    expect(codes.filter((one) => one === 'sign-in-refused')).toHaveLength(5);
    expect(codes.filter((one) => one === 'too-many-attempts')).toHaveLength(7);
    const within = (minutes: number, ms: number) => ({
      at: new Date(NOW.getTime() + minutes * 60_000 + ms),
      address: 'elsewhere',
    });
    await expect(signIn(email, PASSWORD, within(10, -1))).rejects.toEqual(code('too-many-attempts'));
    expect(await signIn(email, PASSWORD, within(10, 0))).toMatchObject({ name: 'scheduler' });
  });

  it('takes no more than twenty refused attempts from an address, over all accounts', async () => {
    for (let attempt = 1; attempt <= 20; attempt += 1) {
      const guess = signIn(`nobody${attempt}@test.example`, 'x', { address: 'one house' });
      await expect(guess).rejects.toEqual(code('sign-in-refused'));
    }
    const right = signIn('operator@test.example', PASSWORD, { address: 'one house' });
    await expect(right).rejects.toEqual(code('too-many-attempts'));
    expect(await signIn('operator@test.example')).toMatchObject({ name: 'operator' });
  });

  it('does not count what was right', async () => {
    for (let time = 1; time <= 8; time += 1) await signIn('operator@test.example');
    expect(await signIn('operator@test.example')).toMatchObject({ name: 'operator' });
  });
});

describe('a session', () => {
  it('carries the roles that the person has now, not those at sign-in', async () => {
    const owner = await world.as('owner');
    const { personId } = (await world.as('maintainer')).actor;
    await changeRoles({ ctx: owner, input: { personId, roles: ['scheduler', 'operator'] } });
    expect(await session(personId, 1)).toMatchObject({ roles: ['operator', 'scheduler'] });
  });

  it('is over, and told of, once the person is disabled, and stays over when they come back', async () => {
    const owner = await world.as('owner');
    const { personId } = (await world.as('maintainer')).actor;
    const listener = await listenForNews(world.url);
    await disablePerson({ ctx: owner, input: { personId } });
    expect(await session(personId, 1)).toBeNull();
    expect(await listener.heard('person')).toEqual([{ news: 'person', personId }]);
    await listener.close();
    await enablePerson({ ctx: owner, input: { personId } });
    expect(await session(personId, 1)).toBeNull();
    expect((await signIn('maintainer@test.example')).sessionEpoch).toBe(2);
    expect(await session(personId, 2)).not.toBeNull();
  });

  it('is over once the password is changed', async () => {
    const owner = await world.as('owner');
    const { personId } = (await world.as('maintainer')).actor;
    await setPassword({ ctx: owner, input: { personId, password: 'another long one' } });
    expect(await session(personId, 2)).toBeNull();
    await expect(signIn('maintainer@test.example')).rejects.toEqual(code('sign-in-refused'));
    expect(await signIn('maintainer@test.example', 'another long one')).toMatchObject({ sessionEpoch: 3 });
  });

  it.each([null, {}, { personId: 'x', epoch: 1 }, { personId: '0'.repeat(36) }])(
    'is none when it says %j',
    async (said) => {
      expect(await findSessionActor({ db: world.db, session: said })).toBeNull();
    },
  );
});

describe('the last owner', () => {
  it('cannot be disabled and cannot lose the role', async () => {
    const owner = await world.as('owner');
    const { personId } = owner.actor;
    await expect(disablePerson({ ctx: owner, input: { personId } })).rejects.toEqual(code('illegal-step'));
    await expect(changeRoles({ ctx: owner, input: { personId, roles: ['operator'] } })).rejects.toEqual(
      code('illegal-step'),
    );
  });

  it('is left even when two owners disable each other at once', async () => {
    const owner = await world.as('owner');
    const input = { name: 'Two', email: 'two@test.example', roles: ['owner'], password: PASSWORD };
    const second = await addPerson({ ctx: owner, input });
    const results = await Promise.allSettled([
      disablePerson({ ctx: owner, input: { personId: second.id } }),
      disablePerson({ ctx: owner, input: { personId: owner.actor.personId } }),
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    await world.query('update people set disabled_at = null where id = $1', [owner.actor.personId]);
  });
});

describe('adding people', () => {
  it('writes to them through the outbox, and refuses an e-mail that is known in any case', async () => {
    const owner = await world.as('owner');
    const input = { name: 'New', email: 'new@test.example', roles: ['operator'], password: PASSWORD };
    const added = await addPerson({ ctx: owner, input });
    const mails = await world.query(`select payload from outbox where payload->>'personId' = $1`, [added.id]);
    expect(mails).toEqual([{ payload: { personId: added.id, template: 'person-added' } }]);
    const again = addPerson({ ctx: owner, input: { ...input, email: 'NEW@test.example' } });
    await expect(again).rejects.toEqual(code('already-exists'));
  });

  it('is an owner’s work only', async () => {
    const roles = ['operator', 'scheduler'] as const;
    for (const role of roles) {
      const ctx = await world.as(role);
      await expect(listPeople({ ctx })).rejects.toEqual(code('not-allowed'));
      await expect(addPerson({ ctx, input: {} })).rejects.toEqual(code('not-allowed'));
    }
  });
});
