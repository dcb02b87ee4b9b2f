import { randomUUID } from 'node:crypto';
import { readdir } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { systemClock } from '@/agent/clock';
import { obtainIdentity } from '@/agent/uplink/pair';
import { pairingSchema } from '@/lib/protocol/pairing';
import { makeFolder } from './journal-support';

const agentId = randomUUID();
const CODE = 'ABCD-EFGH-JKMN-PQRS';

/** A server that gives each code one token, and whose first answers may be lost on the way. */
function serverThatLoses(answers: number) {
  const proposed: string[] = [];
  let lost = 0;
  const answer: typeof fetch = async (_url, init) => {
    const { token } = pairingSchema.parse(JSON.parse(String(init?.body)));
    if (token === undefined) throw new Error('the agent proposed no token');
    proposed.push(token);
    lost += 1;
    if (lost <= answers) throw new TypeError('fetch failed');
    return Response.json({ agentId, name: 'Bench', token }, { status: 201 });
  };
  return { proposed, answer };
}

describe('pairing', () => {
  // A code is good for one token: when its answer was lost, the agent could not be paired with it any more.
  it('asks with the same token again after an answer was lost, also after a new start', async () => {
    const dataDir = await makeFolder();
    const { proposed, answer } = serverThatLoses(2);
    const closing = new AbortController().signal;
    const options = {
      server: 'http://127.0.0.1:1',
      dataDir,
      software: 'test',
      clock: systemClock(),
      closing,
    };
    const pair = (pairingCode: string) => obtainIdentity({ ...options, pairingCode, fetch: answer });
    await expect(pair(CODE)).rejects.toMatchObject({ code: 'service-away' });
    await expect(pair(CODE)).rejects.toMatchObject({ code: 'service-away' });
    const identity = await pair(CODE);
    expect(new Set(proposed)).toEqual(new Set([identity.token]));
    expect(await readdir(dataDir)).toEqual(['token.json']);
    expect(await pair(CODE)).toEqual(identity);
    expect(proposed).toHaveLength(3);
    const other = await pair('ABCD-EFGH-JKMN-PQRT');
    expect(other.token).not.toBe(identity.token);
  });
});
