import { control } from './core/controls';
import { controlRequestSchema, type ControlInput, type ControlRequest } from './core/control-requests';
import { RigCore } from './core/rig-core';
import { snapshotOf, type Snapshot } from './core/snapshot';
import { openControl, type ControlSocket } from './edges/control';
import { Pty } from './edges/pty';
import { openTally, type TallyFile } from './edges/tally-file';
import { rigSettingsSchema, type RigInput } from './settings';
import type { TallyLine } from './tally';

/** Node's timers take no longer wait than this. */
const LONGEST_TIMER_MS = 2_147_483_647;

export interface VirtualRigOptions extends RigInput {
  /** Path at which the serial port appears. */
  tty: string;
  /** Path of the control socket, if one is wanted. */
  control?: string;
  /** File that the tally is appended to, if one is wanted. */
  tally?: string;
  onTally?: (line: TallyLine) => void;
  onDisplay?: (text: string) => void;
  /** Every piece of text on the line, as it passes; for looking on. */
  onTraffic?: (direction: 'in' | 'out', text: string) => void;
  onFailed?: (error: Error) => void;
}

export interface VirtualRig {
  /** @returns when the port can be opened and the control socket listens. */
  start: () => Promise<void>;
  /** Does one thing to the rig, as the control socket would. @returns what that answers. */
  control: (request: ControlInput) => Promise<object>;
  snapshot: () => Snapshot;
  /** Takes everything away again: socat, link, socket, file. */
  stop: () => Promise<void>;
}

/** Makes a virtual rig that lives in this process, by the real clock. Nothing happens before `start`. */
export function createVirtualRig(options: VirtualRigOptions): VirtualRig {
  const settings = rigSettingsSchema.parse(options);
  // The rig was switched on a boot ago: whoever opens it now finds it awake.
  const startedAt = performance.timeOrigin + performance.now() - settings.firmware.bootMs / settings.speed;
  const wallAt = (mechanicalMs: number) => startedAt + mechanicalMs / settings.speed;
  const mechanicalNow = () => (performance.timeOrigin + performance.now() - startedAt) * settings.speed;
  let tallyFile: TallyFile | undefined;
  let controlSocket: ControlSocket | undefined;
  let timer: NodeJS.Timeout | undefined;
  let running = false;
  let outgoing = '';

  const core = new RigCore(settings, {
    send: (text) => {
      outgoing += text;
    },
    display: (text) => options.onDisplay?.(text),
    tally: (event, mechanicalMs) => {
      const line = {
        rig: settings.name,
        atMs: rounded(wallAt(mechanicalMs)),
        mechanicalMs: rounded(mechanicalMs),
      };
      const whole: TallyLine = { ...line, ...event };
      tallyFile?.append(whole);
      options.onTally?.(whole);
    },
  });

  const pty = new Pty(options.tty, {
    opened: () => act(() => core.openPort()),
    received: (text) =>
      act(() => {
        options.onTraffic?.('in', text);
        core.receive(text);
      }),
    closed: () => act(() => core.closePort()),
    failed: (error) => options.onFailed?.(error),
  });

  /** Brings the rig to the present, does something there, and sleeps until it has something to do. */
  function act<Result>(deed: () => Result): Result {
    core.advanceTo(mechanicalNow());
    const result = deed();
    flush();
    schedule();
    return result;
  }

  /** One write for all that one moment had to say. */
  function flush(): void {
    if (outgoing === '') return;
    options.onTraffic?.('out', outgoing);
    pty.send(outgoing);
    outgoing = '';
  }

  function schedule(): void {
    clearTimeout(timer);
    const dueAt = core.nextDueAt();
    if (!running || dueAt === undefined) return;
    const waitMs = Math.ceil((dueAt - mechanicalNow()) / settings.speed);
    timer = setTimeout(() => act(() => undefined), Math.min(LONGEST_TIMER_MS, Math.max(1, waitMs)));
  }

  async function carryOut(request: ControlRequest): Promise<object> {
    if (request.do !== 'usb') return act(() => control(core, request));
    await (request.plugged ? pty.plug(request.path) : pty.unplug());
    return {};
  }

  return {
    start: async () => {
      running = true;
      if (options.tally !== undefined) tallyFile = openTally(options.tally);
      if (options.control !== undefined) controlSocket = await openControl(options.control, carryOut);
      core.switchOn();
      act(() => undefined);
      await pty.plug();
    },
    control: (request) => carryOut(controlRequestSchema.parse(request)),
    snapshot: () => act(() => snapshotOf(core)),
    stop: async () => {
      running = false;
      clearTimeout(timer);
      await controlSocket?.close();
      await pty.unplug();
      clearTimeout(timer);
      tallyFile?.close();
      tallyFile = undefined;
    },
  };
}

/** @returns the number to a microsecond. */
function rounded(ms: number): number {
  return Math.round(ms * 1000) / 1000;
}
