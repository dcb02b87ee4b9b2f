import { encode } from 'next-auth/jwt';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sessionWatch } from '@/lib/auth/current-actor';
import { database } from '@/lib/auth/database';
import { webEnv } from '@/lib/env/web';
import { EllwandError } from '@/lib/errors';
import { agentRoute, personRoute } from '@/lib/http/route';
import { disablePerson } from '@/lib/services/people/disable-person';
import { openWorld, type World } from '@/tests/support/setup-world';
import { setWebEnvironment } from '@/tests/support/web-env';

let world: World;
beforeAll(async () => {
  world = await openWorld();
  setWebEnvironment({ databaseUrl: world.url });
});
afterAll(async () => {
  await (database() as unknown as { $client: { end: () => Promise<void> } }).$client.end();
  await world.close();
});

const route = personRoute<{ id: string }>(({ ctx, params }) =>
  Promise.resolve({ name: ctx.actor.name, roles: ctx.actor.roles, id: params.id }),
);
const call = (headers: Record<string, string> = {}, method = 'GET') =>
  route(new Request('http://127.0.0.1/api/x/7', { method, headers }), {
    params: Promise.resolve({ id: '7' }),
  });
const cookieOf = async (personId: string, epoch = 1, secret = webEnv().authSecret) =>
  `ellwand-test.session=${await encode({ token: { personId, epoch }, secret })}`;

describe('a person’s route', () => {
  it('knows who is behind the cookie and answers JSON that nothing keeps', async () => {
    const { actor } = await world.as('operator');
    const response = await call({ cookie: await cookieOf(actor.personId) });
    expect(response.headers.get('cache-control')).toBe('no-store');
    expect(await response.json()).toEqual({ name: 'operator', roles: ['operator'], id: '7' });
  });

  it('answers a problem to nobody, to a foreign secret and to an old session', async () => {
    const { personId } = (await world.as('operator')).actor;
    const cookies = [
      '',
      'ellwand-test.session=rubbish',
      await cookieOf(personId, 1, 'another secret, of thirty-two letters or more'),
      await cookieOf(personId, 0),
    ];
    for (const cookie of cookies) {
      const response = await call({ cookie });
      expect(response.status).toBe(401);
      expect(response.headers.get('content-type')).toBe('application/problem+json');
      expect(await response.json()).toMatchObject({ code: 'not-signed-in', type: 'about:blank' });
    }
  });

  it('writes only for a page of our own', async () => {
    const cookie = await cookieOf((await world.as('operator')).actor.personId);
    const foreign = await call({ cookie, origin: 'http://elsewhere.example', host: 'here' }, 'POST');
    expect(foreign.status).toBe(403);
    const own = await call({ cookie, origin: 'http://here', host: 'here' }, 'POST');
    expect(own.status).toBe(200);
  });

  it('shuts a disabled person out with the next request, and tells an open stream so', async () => {
    const { personId } = (await world.as('scheduler')).actor;
    const cookie = await cookieOf(personId);
    const watch = sessionWatch(new Request('http://127.0.0.1/api/live', { headers: { cookie } }));
    expect(await watch()).toMatchObject({ personId });
    await disablePerson({ ctx: await world.as('owner'), input: { personId } });
    expect((await call({ cookie })).status).toBe(401);
    expect(await watch()).toBeNull();
  });
});

describe('an agent’s route', () => {
  it('is refused as its authenticator says', async () => {
    const refusing = agentRoute(
      () => Promise.reject(new EllwandError('token-refused')),
      () => Promise.resolve('never'),
    );
    const response = await refusing(new Request('http://127.0.0.1/api/agent/x'), {
      params: Promise.resolve({}),
    });
    expect(response.status).toBe(401);
    expect(await response.json()).toMatchObject({ code: 'token-refused' });
  });
});
