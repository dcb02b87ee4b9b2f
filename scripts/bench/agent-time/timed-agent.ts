/**
 * `timed-agent.ts --config FILE --traffic FILE`: the agent put together as agent/main.ts does, but for the port, which
 * notes when what passed. The notes are kept in memory and written at SIGTERM.
 */
import { randomBytes, randomInt, randomUUID } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { systemClock } from '@/agent/clock';
import { loadConfig } from '@/agent/config';
import { objectionAt } from '@/agent/fleet/objection';
import { Fleet } from '@/agent/fleet/fleet';
import { openJournal } from '@/agent/journal/journal';
import { openSerialPort } from '@/agent/link/serial-port';
import { openProgramStore } from '@/agent/programs/store';
import { createRecorder } from '@/agent/rig/recorder';
import { Rig } from '@/agent/rig/rig';
import { isSnapshot, journalNoteSchema } from '@/agent/runner/notes';
import { restoreRig } from '@/agent/runner/restore';
import { SOFTWARE } from '@/agent/software';
import { obtainIdentity } from '@/agent/uplink/pair';
import { createUplink } from '@/agent/uplink/uplink';
import type { Passed } from './added-time';
import { watchPort } from './watched-port';

const REPORT_EVERY_MS = 1_000;

const clock = systemClock();
const random = () => Math.random();
const randomChallenge = () => randomBytes(18).toString('base64url');
const randomCode = () => String(randomInt(10_000)).padStart(4, '0');
const say = (text: string) => console.log(text);

async function runTimed(configPath: string, traffic: Passed[]): Promise<void> {
  const closing = new AbortController();
  const closed = new Promise<void>((resolve) => {
    closing.signal.addEventListener('abort', () => resolve(), { once: true });
  });
  process.once('SIGTERM', () => closing.abort());
  const config = await loadConfig(configPath);
  const { journal, history, damaged } = await openJournal({
    dir: join(config.dataDir, 'journal'),
    randomId: randomUUID,
    noteSchema: journalNoteSchema,
    isSnapshot,
    onDamage: ({ path }) => say(`damaged: ${path}`),
  });
  const programs = await openProgramStore(config.dataDir);
  const recorder = createRecorder(journal, history);
  const calling = { server: config.server, software: SOFTWARE, clock, fetch };
  const identity = await obtainIdentity({ ...config, ...calling, closing: closing.signal });
  const uplink = createUplink({
    ...calling,
    token: identity.token,
    journal,
    random,
    say: ({ topic, text }) => say(`${topic}: ${text}`),
  });
  const fleet: Fleet = new Fleet({
    config,
    uplink,
    date: () => clock.date(),
    say,
    startRig: async ({ rigId, profile, fence }, path) => {
      const nowMs = clock.date().getTime();
      const born = { rigId, profile, fence, nowMs, challenge: randomChallenge() };
      const rig = new Rig({
        state: restoreRig({ ...born, memory: null, held: null }),
        path,
        openPort: watchPort(openSerialPort, (passed) => traffic.push(passed)),
        clock,
        objection: objectionAt(1),
        random,
        randomChallenge,
        randomCode,
        recorder,
        programs,
        uplink,
        onChange: () => fleet.report(),
        onFatal: (error) => {
          console.error(error);
          closing.abort();
        },
      });
      await rig.start(damaged);
      return rig;
    },
  });
  uplink.onCommand((command) => fleet.command(command));
  await fleet.bind(await uplink.fetchRigs());
  uplink.start();
  const reports = setInterval(() => fleet.report(), REPORT_EVERY_MS);
  await closed;
  clearInterval(reports);
  await fleet.close();
  await uplink.close();
  await journal.close();
}

const { values } = parseArgs({ options: { config: { type: 'string' }, traffic: { type: 'string' } } });
if (values.config === undefined || values.traffic === undefined) {
  throw new Error('--config FILE and --traffic FILE are needed');
}
const traffic: Passed[] = [];
await runTimed(values.config, traffic);
writeFileSync(values.traffic, JSON.stringify(traffic));
process.exit();
