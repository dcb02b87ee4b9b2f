import { spawn, spawnSync, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { closeSync, mkdirSync, openSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileErrorCode } from '@/agent/journal/durable-file';
import { createVirtualRig, type VirtualRig } from '@/agent/virtual/rig';
import type { ControlInput } from '@/agent/virtual/core/control-requests';
import type { RigInput } from '@/agent/virtual/settings';
import type { TallyLine } from '@/agent/virtual/tally';
import { Relay } from './relay';

/** Motion over a real rig's, and the agent's waits over a real agent's. */
export const RIG_SPEED = 12;
export const AGENT_SPEED = 4;
/** As `npm run agent` starts it. */
const LEAN = ['--max-semi-space-size=1', '--optimize-for-size'];
/** Room for some journal segments: what a fault fills up is small. */
const DISK = 'size=24m';
/** The agent asks for them on its own account: they belong to no program. */
const ASKED = /^(?:|M119|M105|M115|M110 N0|M117.*)$/;
const MOVES = /^(?:G0|G1|G28)\b/;
const SPOOL_MM = 100_000;

export interface LineSeen {
  atMs: number;
  text: string;
}

interface StandParts {
  rigName: string;
  rigId: string;
  folder: string;
  server: string;
  /** The checkout. */
  repo: string;
  /** What Node is to run as the agent, with the arguments before its own. */
  agentProgram: readonly string[];
  pairingCode: string;
  settings: RigInput;
  /** The agent's data lie on a small disk of their own, which can be filled up. */
  ownDisk: boolean;
}

/** One rig of the harness with all that hangs on it: pseudo-terminal, agent process, network, disk. */
export class Stand {
  readonly tally: TallyLine[] = [];
  readonly lines: LineSeen[] = [];
  /** Called before the rig takes the n-th line of a program, from 1 since `watch`. */
  #onProgramLine: (count: number) => void = () => undefined;
  #programLines = 0;
  #partLine = '';
  #lastNumber: string | undefined;
  #agent: ChildProcess | null = null;
  #restart: NodeJS.Timeout | null = null;
  #isDown = false;

  private constructor(
    private readonly parts: StandParts,
    readonly rig: VirtualRig,
    readonly relay: Relay,
  ) {}

  static async open(parts: StandParts): Promise<Stand> {
    mkdirSync(join(parts.folder, 'data'), { recursive: true });
    const relay = await Relay.open(parts.server);
    const hears = { line: (_text: string): void => undefined, tally: (_line: TallyLine): void => undefined };
    const rig = createVirtualRig({
      ...parts.settings,
      speed: RIG_SPEED,
      tty: join(parts.folder, 'tty'),
      onTally: (line) => hears.tally(line),
      onTraffic: (direction, text) => direction === 'in' && hears.line(text),
    });
    const stand = new Stand(parts, rig, relay);
    hears.line = (text) => stand.#hear(text);
    hears.tally = (line) => stand.tally.push(line);
    await rig.start();
    if (parts.ownDisk) mountDisk(stand.dataDir);
    writeFileSync(stand.configPath, JSON.stringify(stand.#config()));
    stand.startAgent();
    return stand;
  }

  get name(): string {
    return this.parts.rigName;
  }

  get rigId(): string {
    return this.parts.rigId;
  }

  get dataDir(): string {
    return join(this.parts.folder, 'data');
  }

  get configPath(): string {
    return join(this.parts.folder, 'agent.json');
  }

  /** Counts lines of programs anew. */
  watch(onProgramLine: (count: number) => void): void {
    this.#programLines = 0;
    this.#onProgramLine = onProgramLine;
  }

  control(request: ControlInput): Promise<object> {
    return this.rig.control(request);
  }

  movesSince(fromMs: number): number[] {
    return this.lines.filter(({ atMs, text }) => atMs >= fromMs && MOVES.test(text)).map(({ atMs }) => atMs);
  }

  startAgent(): void {
    if (this.#agent || this.#isDown) return;
    const log = openSync(join(this.parts.folder, 'agent.log'), 'a');
    const args = [...LEAN, ...this.parts.agentProgram, '--config', this.configPath];
    const agent = spawn('setpriv', ['--pdeathsig', 'KILL', process.execPath, ...args], {
      cwd: this.parts.repo,
      stdio: ['ignore', log, log],
    });
    closeSync(log);
    this.#agent = agent;
    agent.once('exit', () => {
      if (this.#agent !== agent) return;
      // It ends by itself when it can keep no record; whoever watches over it starts it again.
      this.#agent = null;
      this.#restartAfter(200);
    });
  }

  /** As a power cut would end it; started again after `downMs`. */
  killAgent(downMs: number): void {
    const agent = this.#agent;
    this.#agent = null;
    agent?.kill('SIGKILL');
    this.#restartAfter(downMs);
  }

  /** Takes all the room on the disk that the agent keeps its journal on. */
  fillDisk(): void {
    const filler = join(this.dataDir, 'filler');
    const file = openSync(filler, 'a');
    for (const bytes of [1 << 20, 1 << 12]) fillBy(file, Buffer.alloc(bytes));
    closeSync(file);
  }

  freeDisk(): void {
    rmSync(join(this.dataDir, 'filler'), { force: true });
  }

  /** Everything of this stand works again; wire and blade are new. */
  async heal(): Promise<void> {
    this.relay.heal();
    this.freeDisk();
    for (const direction of ['in', 'out'] as const) {
      await this.control({ do: 'noise', kind: 'flip', direction, bytes: 0, probability: 0 });
    }
    await this.control({ do: 'usb', plugged: true });
    await this.control({ do: 'power', on: true });
    await this.control({ do: 'motor-power', on: true });
    await this.control({ do: 'guard', open: false });
    await this.control({ do: 'wire', out: false });
    await this.control({ do: 'spool', mm: SPOOL_MM });
    await this.control({ do: 'blade', state: 'new' });
    this.startAgent();
  }

  async close(): Promise<void> {
    this.#isDown = true;
    if (this.#restart) clearTimeout(this.#restart);
    const agent = this.#agent;
    this.#agent = null;
    if (agent && agent.exitCode === null) {
      const gone = once(agent, 'exit');
      agent.kill('SIGKILL');
      await gone;
    }
    await this.rig.stop();
    await this.relay.close();
    if (this.parts.ownDisk) spawnSync('umount', ['-l', this.dataDir]);
  }

  #restartAfter(ms: number): void {
    if (this.#restart) clearTimeout(this.#restart);
    this.#restart = setTimeout(() => this.startAgent(), ms);
  }

  #config() {
    const { rigName, folder, pairingCode } = this.parts;
    return {
      server: this.relay.url,
      dataDir: 'data',
      pairingCode,
      clockSpeed: AGENT_SPEED,
      rigs: [{ rig: rigName, port: join(folder, 'tty') }],
    };
  }

  #hear(chunk: string): void {
    const parts = (this.#partLine + chunk).split('\n');
    this.#partLine = parts.pop() ?? '';
    for (const part of parts) {
      const [, number, text = ''] = /^(?:N(\d+) )?([^*]*)/.exec(part) ?? [];
      this.lines.push({ atMs: Date.now(), text });
      const isAgain = number !== undefined && number === this.#lastNumber;
      this.#lastNumber = number;
      if (isAgain || ASKED.test(text)) continue;
      this.#programLines += 1;
      this.#onProgramLine(this.#programLines);
    }
  }
}

function fillBy(file: number, block: Buffer): void {
  try {
    for (;;) writeFileSync(file, block);
  } catch (error) {
    if (fileErrorCode(error) !== 'ENOSPC') throw error;
  }
}

/** Whether this computer lets us make a small disk that can be filled up. */
export function canMount(folder: string): boolean {
  mkdirSync(folder, { recursive: true });
  if (spawnSync('mount', ['-t', 'tmpfs', '-o', DISK, 'tmpfs', folder]).status !== 0) return false;
  spawnSync('umount', ['-l', folder]);
  return true;
}

function mountDisk(folder: string): void {
  const { status, stderr } = spawnSync('mount', ['-t', 'tmpfs', '-o', DISK, 'tmpfs', folder]);
  if (status !== 0) throw new Error(`No disk could be mounted: ${String(stderr)}`);
}
