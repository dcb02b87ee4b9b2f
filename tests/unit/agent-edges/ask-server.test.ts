import { describe, expect, it } from 'vitest';
import { systemClock } from '@/agent/clock';
import { boundRigs } from '@/agent/fleet/ask-server';
import type { LogEntry } from '@/agent/log';
import { loadCachedRigs, saveCachedRigs } from '@/agent/uplink/rigs-cache';
import { EllwandError, type ErrorCode } from '@/lib/errors';
import { makeFolder } from './journal-support';

const KEPT = { rigs: [] };

function asking() {
  const log: LogEntry[] = [];
  return {
    clock: systemClock(),
    random: () => 0,
    log: (entry: LogEntry) => void log.push(entry),
    entries: log,
  };
}

const refusing = (code: ErrorCode) => ({ fetchRigs: () => Promise.reject(new EllwandError(code)) });

describe('an agent that begins', () => {
  it.each(['service-away', 'unexpected'] as const)(
    'takes its rigs as told last while the server says %s',
    async (code) => {
      const dataDir = await makeFolder();
      await saveCachedRigs(dataDir, KEPT);
      const parts = asking();
      const rigs = await boundRigs({ dataDir }, refusing(code), parts, new AbortController().signal);
      expect(rigs).toEqual(KEPT);
      expect(parts.entries.map(({ code }) => code)).toEqual(['service-away']);
    },
  );

  it.each(['agent-too-old', 'token-refused', 'protocol-unknown'] as const)(
    'starts nothing by what it heard before when the server says %s',
    async (code) => {
      const dataDir = await makeFolder();
      await saveCachedRigs(dataDir, KEPT);
      const answer = boundRigs({ dataDir }, refusing(code), asking(), new AbortController().signal);
      await expect(answer).rejects.toMatchObject({ code });
    },
  );

  it('keeps what it is told for the next time', async () => {
    const dataDir = await makeFolder();
    const uplink = { fetchRigs: () => Promise.resolve(KEPT) };
    await boundRigs({ dataDir }, uplink, asking(), new AbortController().signal);
    expect(await loadCachedRigs(dataDir)).toEqual(KEPT);
  });
});
