import { spawn, type ChildProcess } from 'node:child_process';
import { createHash, randomUUID } from 'node:crypto';
import { once } from 'node:events';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { createVirtualRig, type VirtualRig, type VirtualRigOptions } from '@/agent/virtual/rig';
import type { TallyLine } from '@/agent/virtual/tally';
import { generateProgram } from '@/lib/program/generate';
import type { Profile } from '@/lib/program/profile';
import type { Command, CommandAnswer, Conditions, MovingCommand } from '@/lib/protocol/commands';
import type { EventBody, EventKind } from '@/lib/protocol/events';
import type { RunProgram } from '@/lib/protocol/pairing';
import type { RigReport } from '@/lib/protocol/report';
import { DESK_PAIRING_CODE, openFakeDesk, type FakeDesk } from './fake-desk';

const repo = fileURLToPath(new URL('../..', import.meta.url));

export const PERSON = '00000000-0000-4000-8000-000000000001';
export const WIRE = '00000000-0000-4000-8000-000000000002';

/** A profile that fits the virtual rig as it is by default: home switch at 0 of the machine, jaws shut at -4. */
export const benchProfile: Profile = {
  cutAxis: {
    axis: 'Z',
    homing: 'endstop',
    homeMm: 10,
    standbyMm: 8,
    cutMm: 5.5,
    parkMm: 12,
    lowestMm: 5,
    highestMm: 20,
    speedMmS: 25,
    accelerationMmS2: 500,
    stepsPerMm: 100,
  },
  feed: {
    feedPerMm: 1,
    speedMmS: 60,
    accelerationMmS2: 1000,
    longestMoveMm: 150,
    shortestPieceMm: 10,
    longestPieceMm: 3000,
    trimMm: 12,
  },
  registerAxis: 'Y',
  steppersHoldS: 600,
  fitted: {
    guardSwitch: { endstop: 'x_max', closedReads: 'TRIGGERED' },
    guardCutsMotorPower: false,
    hardwareStop: false,
    wireSwitch: true,
    display: true,
    beeper: true,
    heater: true,
    emergencyParser: true,
  },
  serial: { baudRate: 115200, resetsOnOpen: false },
};

export interface BenchOptions {
  profile?: Profile;
  rig?: Partial<VirtualRigOptions>;
}

/** A desk, a virtual rig behind a real pseudo-terminal, and the agent as a process of its own. */
export class AgentBench {
  readonly rigId = randomUUID();
  readonly tally: TallyLine[] = [];
  /** Called for each line that reaches the rig, before the rig takes it. */
  onLine: (line: string) => void = () => undefined;
  onTally: (line: TallyLine) => void = () => undefined;
  readonly folder = mkdtempSync(join(tmpdir(), 'agent-bench-'));
  readonly configPath = join(this.folder, 'agent.json');
  rig!: VirtualRig;
  desk!: FakeDesk;
  agent: ChildProcess | null = null;
  agentSaid = '';
  fence = 0;
  readonly profile: Profile;
  #partLine = '';

  private constructor(private readonly options: BenchOptions) {
    this.profile = options.profile ?? benchProfile;
  }

  static async open(options: BenchOptions = {}): Promise<AgentBench> {
    const bench = new AgentBench(options);
    bench.desk = await openFakeDesk();
    bench.desk.rigs = [
      { rigId: bench.rigId, name: 'bench rig', fence: 0, profileVersion: 1, profile: bench.profile },
    ];
    bench.rig = createVirtualRig({
      speed: 20,
      resetOnOpen: bench.profile.serial.resetsOnOpen,
      ...options.rig,
      tty: join(bench.folder, 'tty'),
      onTally: (line) => {
        bench.tally.push(line);
        bench.onTally(line);
      },
      onTraffic: (direction, text) => direction === 'in' && bench.#hear(text),
    });
    await bench.rig.start();
    writeFileSync(
      bench.configPath,
      JSON.stringify({
        server: bench.desk.url,
        dataDir: 'data',
        pairingCode: DESK_PAIRING_CODE,
        rigs: [{ rig: 'bench rig', port: join(bench.folder, 'tty') }],
      }),
    );
    return bench;
  }

  #hear(text: string): void {
    const lines = (this.#partLine + text).split('\n');
    this.#partLine = lines.pop() ?? '';
    for (const line of lines) this.onLine(line.replace(/^N\d+ /, '').replace(/\*\d+$/, ''));
  }

  startAgent(): void {
    const entry = ['scripts/run.mjs', 'agent/main.ts', '--', '--config', this.configPath];
    const agent = spawn(process.execPath, entry, { cwd: repo, stdio: ['ignore', 'pipe', 'pipe'] });
    for (const stream of [agent.stdout, agent.stderr]) {
      stream.setEncoding('utf8').on('data', (text: string) => (this.agentSaid += text));
    }
    this.agent = agent;
  }

  /** Kills the agent as a power cut would. Returns at once. */
  kill(): Promise<unknown> {
    const agent = this.agent;
    this.agent = null;
    if (!agent || agent.exitCode !== null) return Promise.resolve();
    const gone = once(agent, 'exit');
    agent.kill('SIGKILL');
    return gone;
  }

  async restartAgent(): Promise<void> {
    await this.kill();
    this.startAgent();
  }

  async close(): Promise<void> {
    if (this.agent && this.agent.exitCode === null) {
      const gone = once(this.agent, 'exit');
      this.agent.kill('SIGTERM');
      await gone;
    }
    await this.rig.stop();
    await this.desk.close();
    rmSync(this.folder, { recursive: true, force: true });
  }

  report(): RigReport {
    const report = this.desk.report(this.rigId);
    if (!report) throw new Error('the agent has not reported yet');
    return report;
  }

  until(happened: (report: RigReport) => boolean, what: string, timeoutMs?: number): Promise<RigReport> {
    return this.desk.until(
      () => {
        const report = this.desk.report(this.rigId);
        return report && happened(report) ? report : null;
      },
      what,
      timeoutMs,
    );
  }

  /** The events of one kind once the desk was told so many of them. */
  told<Kind extends EventKind>(kind: Kind, count: number): Promise<Extract<EventBody, { kind: Kind }>[]> {
    return this.desk.until(() => {
      const said = this.desk.said(kind);
      return said.length >= count && said;
    }, `${count} × ${kind}`);
  }

  /** Resolves when the rig is met and every signal that is fitted was read. */
  ready(): Promise<RigReport> {
    return this.until(
      ({ port, signals }) =>
        port === 'open' && Object.values(signals).every(({ reading }) => reading !== 'unknown'),
      'the rig is read',
    );
  }

  makeRun(order: { pieces: number; lengthMm: number; tag?: number; firstPieces?: number }): RunProgram {
    const { pieces, lengthMm, tag = 17, firstPieces = 0 } = order;
    const program = generateProgram(this.profile, { tag, pieces, lengthMm }).text;
    const run: RunProgram = {
      runId: randomUUID(),
      rigId: this.rigId,
      fence: this.fence,
      tag,
      pieces,
      lengthMm,
      firstPieces,
      wireId: WIRE,
      profileVersion: 1,
      profile: this.profile,
      programSha256: createHash('sha256').update(program).digest('hex'),
      program,
    };
    this.desk.programs.set(run.runId, run);
    return run;
  }

  envelope() {
    return {
      id: randomUUID(),
      rigId: this.rigId,
      personId: PERSON,
      fence: this.fence,
      issuedAt: new Date().toISOString(),
    };
  }

  conditions(): Conditions {
    return {
      notesVersion: 1,
      acknowledgedBy: PERSON,
      acknowledgedAt: new Date().toISOString(),
      trayCleared: true,
      workHold: false,
      loadedWireId: WIRE,
      spoolLeftMm: 100_000,
    };
  }

  async takeProgram(run: RunProgram): Promise<CommandAnswer> {
    return this.desk.give({ kind: 'take-program', ...this.envelope(), runId: run.runId });
  }

  /** Has the code shown and reads it off the rig's display. */
  async readCode(): Promise<string> {
    const answer = await this.desk.give({ kind: 'show-code', ...this.envelope() });
    if (answer.outcome !== 'done') throw new Error(`no code shown: ${answer.code}`);
    return this.rig.snapshot().display.replace('CODE ', '');
  }

  async startCommand(run: RunProgram): Promise<Extract<MovingCommand, { kind: 'start-run' }>> {
    const presenceCode = await this.readCode();
    return {
      kind: 'start-run',
      ...this.envelope(),
      challenge: await this.freshChallenge(),
      presenceCode,
      conditions: this.conditions(),
      runId: run.runId,
      programSha256: run.programSha256,
    };
  }

  /** The challenge once the report has caught up with the code on the display. */
  async freshChallenge(): Promise<string> {
    const display = this.rig.snapshot().display;
    const report = await this.until(
      ({ virtualDisplay }) => virtualDisplay === display,
      'the report shows the display',
    );
    return report.challenge;
  }

  async start(run: RunProgram): Promise<void> {
    await this.ready();
    await expectDone(this.takeProgram(run));
    await expectDone(this.desk.give(await this.startCommand(run)));
  }

  async goOn(run: RunProgram): Promise<void> {
    await this.ready();
    const presenceCode = await this.readCode();
    const command: Command = {
      kind: 'go-on',
      ...this.envelope(),
      challenge: await this.freshChallenge(),
      presenceCode,
      conditions: this.conditions(),
      runId: run.runId,
      firstPiecesAgain: false,
    };
    await expectDone(this.desk.give(command));
  }

  /** What the jaws really closed on, in order. */
  closings(): Extract<TallyLine, { kind: 'closing' }>[] {
    return this.tally.flatMap((line) => (line.kind === 'closing' ? [line] : []));
  }
}

async function expectDone(answer: Promise<CommandAnswer>): Promise<void> {
  const given = await answer;
  if (given.outcome !== 'done') throw new Error(`the agent refused: ${given.code}`);
}
