/**
 * `timed-agent.ts --config FILE --traffic FILE`: the agent as agent/main.ts runs it, but for the port, which notes when
 * what passed. The notes are kept in memory and written at SIGTERM.
 */
import { randomBytes, randomInt, randomUUID } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { runAgent } from '@/agent/assemble';
import { scaledClock } from '@/agent/clock';
import { loadConfig } from '@/agent/config';
import { openSerialPort } from '@/agent/link/serial-port';
import { createLog } from '@/agent/log';
import type { Passed } from './added-time';
import { watchPort } from './watched-port';

async function runTimed(configPath: string, traffic: Passed[]): Promise<void> {
  const closing = new AbortController();
  process.once('SIGTERM', () => closing.abort());
  const config = await loadConfig(configPath);
  const clock = scaledClock(config.clockSpeed);
  const edges = {
    clock,
    random: () => Math.random(),
    randomId: randomUUID,
    randomChallenge: () => randomBytes(18).toString('base64url'),
    randomCode: () => String(randomInt(10_000)).padStart(4, '0'),
    openPort: watchPort(openSerialPort, (passed) => traffic.push(passed)),
    listPorts: () => Promise.resolve([]),
    fetch,
    log: createLog({
      format: 'json',
      level: config.log.level,
      date: () => clock.date(),
      write: (line) => process.stdout.write(line),
    }),
  };
  await runAgent(config, edges, closing);
}

const { values } = parseArgs({ options: { config: { type: 'string' }, traffic: { type: 'string' } } });
if (values.config === undefined || values.traffic === undefined) {
  throw new Error('--config FILE and --traffic FILE are needed');
}
const traffic: Passed[] = [];
await runTimed(values.config, traffic);
writeFileSync(values.traffic, JSON.stringify(traffic));
process.exit();
