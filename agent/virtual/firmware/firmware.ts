import { AXES, allAxes, type Axes, type Axis } from '../mechanics/axes';
import type { Mechanics } from '../mechanics/mechanics';
import type { FirmwareSettings, RigSettings } from '../settings';
import type { TallyEvent } from '../tally';
import { bootLines } from './banner';
import { parseCommand } from './command';
import { Executor } from './executor';
import { familyOf, type Family } from './family';
import { freshMemory, type Memory } from './memory';
import { Position } from './position';
import { Receiver } from './receiver';
import { Stepper } from './stepper';

export type BoardState = 'off' | 'booting' | 'running' | 'stopped' | 'halted';

/** Where the firmware's words and deeds go. */
export interface FirmwareSinks {
  send: (line: string) => void;
  display: (text: string) => void;
  tally: (event: TallyEvent, atMs: number) => void;
}

/** The board's firmware: lines in, answers out, moves to the stepper drivers. */
export class Firmware {
  state: BoardState = 'off';
  nowMs = 0;
  memory: Memory;
  position: Position;
  readonly speedMmS: Axes;
  readonly accelerationMmS2: Axes;
  readonly stepsPerMm: Axes;
  readonly stepper: Stepper;
  readonly receiver: Receiver;
  readonly executor: Executor;
  readonly registerAxis: RigSettings['registerAxis'];
  readonly settings: FirmwareSettings;
  readonly family: Family;
  private readonly keepaliveMs: number;
  private stateUntilMs = 0;
  private temperatureAtMs = 0;
  private heardMs = 0;

  constructor(
    rig: RigSettings,
    readonly mechanics: Mechanics,
    readonly sinks: FirmwareSinks,
  ) {
    this.settings = rig.firmware;
    this.family = familyOf(rig.firmware);
    this.keepaliveMs = rig.firmware.keepaliveMs * rig.speed;
    this.registerAxis = rig.registerAxis;
    this.memory = freshMemory(this.settings);
    this.position = new Position(this.settings);
    this.speedMmS = { ...this.settings.speedMmS };
    this.accelerationMmS2 = { ...this.settings.accelerationMmS2 };
    this.stepsPerMm = { ...this.settings.stepsPerMm };
    this.stepper = new Stepper(mechanics, this.settings.plannerMoves);
    const emergency = this.settings.emergencyParser ? (code: string) => this.atOnce(code) : undefined;
    this.receiver = new Receiver(
      {
        send: (line) => this.send(line),
        early: (text) => this.early(text),
        received: (text) => this.received(text),
        emergency,
      },
      () => this.family.numbers(),
      this.settings.receiveBytes,
      this.settings.queuedLines,
    );
    this.executor = new Executor(this, this.keepaliveMs);
  }

  /** @returns whether the board listens at all: booted, and not halted. */
  get answers(): boolean {
    return this.state === 'running' || this.state === 'stopped';
  }

  send(line: string): void {
    this.sinks.send(line);
  }

  /** Takes bytes off the line; what the boot loader or a dead board gets is eaten. */
  receive(text: string): void {
    this.heardMs = this.nowMs;
    let left = text;
    while (left !== '' && this.answers) {
      const before = left.length;
      left = this.receiver.fill(left);
      this.executor.pump();
      if (left.length === before) {
        this.receiver.overflow(left);
        return;
      }
    }
  }

  /** @returns when something happens next without a byte coming in, mechanical ms. */
  nextDueAt(): number | undefined {
    const due = [this.stepper.dueAt(), this.executor.dueAt(), this.limpAt(), this.waitsAt()];
    if (this.state === 'booting') due.push(this.stateUntilMs);
    if (this.memory.temperatureEveryMs > 0) due.push(this.temperatureAtMs);
    const known = due.filter((at) => at !== undefined);
    return known.length === 0 ? undefined : Math.min(...known);
  }

  /** Does all that is due at `nowMs`; the caller has walked through every earlier due moment. */
  advanceTo(nowMs: number): void {
    this.nowMs = nowMs;
    this.stepper.advanceTo(nowMs);
    if (this.state === 'booting' && nowMs >= this.stateUntilMs) this.finishBoot();
    const limpAt = this.limpAt();
    if (limpAt !== undefined && nowMs >= limpAt) this.letGo(AXES, 'timeout');
    this.executor.pump();
    this.executor.keepAlive();
    this.reportTemperature();
    this.sayWait();
    this.watchWire();
  }

  /** Starts the board anew: all it knew is gone, the boot loader runs. */
  reset(cause: 'power' | 'port-opened' | 'button'): void {
    this.powerDown();
    this.sinks.tally({ kind: 'reset', cause }, this.nowMs);
    this.state = 'booting';
    this.stateUntilMs = this.nowMs + this.settings.bootMs;
  }

  /** Takes the logic's power away. */
  powerDown(): void {
    this.stepper.stop();
    this.letGo(AXES, 'reset');
    this.mechanics.heater.targetC = 0;
    this.receiver.clear(true);
    this.executor.clear();
    if (this.memory.displayText !== '') this.show('');
    this.memory = freshMemory(this.settings);
    this.position = new Position(this.settings);
    Object.assign(this.speedMmS, this.settings.speedMmS);
    Object.assign(this.accelerationMmS2, this.settings.accelerationMmS2);
    Object.assign(this.stepsPerMm, this.settings.stepsPerMm);
    Object.assign(this.stepper.presentMm, allAxes(0));
    this.state = 'off';
  }

  /** Stops for good, until a reset: motors and heater off. */
  kill(): void {
    this.stepper.stop();
    this.letGo(AXES, 'killed');
    this.mechanics.heater.targetC = 0;
    this.receiver.clear(false);
    this.executor.clear();
    this.memory.temperatureEveryMs = 0;
    this.state = 'halted';
    this.send(this.family.killed);
    this.sinks.tally({ kind: 'killed' }, this.nowMs);
  }

  /** Stops on an error of its own; `M999` revives it. */
  stopOnError(): void {
    if (this.state !== 'running') return;
    this.mechanics.heater.targetC = 0;
    this.state = 'stopped';
    this.sendStopped();
  }

  /** Ends motion without a ramp; the board takes its place from the step counters and rests for a second. */
  quickStop(): void {
    this.stepper.stop();
    this.position.takeFrom(this.stepper.presentMm, this.stepsPerMm);
    this.executor.stall(1000);
  }

  /** Powers drivers down; where the axes are after that, the firmware does not know. */
  letGo(axes: readonly Axis[], cause: 'timeout' | 'command' | 'killed' | 'reset'): void {
    const held = axes.some((axis) => this.mechanics.power.energised[axis]);
    this.mechanics.energise(axes, false);
    if (held) this.sinks.tally({ kind: 'steppers-off', cause }, this.nowMs);
  }

  show(text: string): void {
    this.memory.displayText = text;
    this.sinks.display(text);
  }

  /** Reports the temperature by itself every `ms`, wall time; 0 ends it. */
  reportTemperatureEvery(ms: number): void {
    this.memory.temperatureEveryMs = (ms * this.keepaliveMs) / this.settings.keepaliveMs;
    this.temperatureAtMs = this.nowMs + this.memory.temperatureEveryMs;
  }

  /** @returns the temperature as `M105` words it. */
  temperatureText(): string {
    const { temperatureC, targetC, drive } = this.mechanics.heater;
    return `T:${temperatureC.toFixed(2)} /${targetC.toFixed(2)} @:${drive}`;
  }

  private sendStopped(): void {
    this.send(this.family.stopped);
  }

  private finishBoot(): void {
    this.state = 'running';
    for (const line of bootLines(this)) this.send(line);
  }

  private atOnce(code: string): void {
    if (!this.answers) return;
    if (code === 'M112') this.kill();
    else if (code === 'M410') this.quickStop();
    else this.memory.heatWaitBroken = true;
  }

  private received(text: string): void {
    if (!this.family.acksOnReceipt) return;
    const number = /^N(\d+)/.exec(text)?.[1] ?? this.receiver.lastNumber;
    this.send(text.includes('M110') ? 'ok' : `ok ${number}`);
  }

  /** When an idle board says that it waits for a line; wall time. */
  private waitsAt(): number | undefined {
    const { waitsEveryMs } = this.family;
    if (waitsEveryMs === null || this.state !== 'running' || !this.executor.idle) return undefined;
    return this.heardMs + (waitsEveryMs * this.keepaliveMs) / this.settings.keepaliveMs;
  }

  private sayWait(): void {
    const atMs = this.waitsAt();
    if (atMs === undefined || this.nowMs < atMs) return;
    this.send('wait');
    this.heardMs = this.nowMs;
  }

  private early(text: string): void {
    const name = parseCommand(text).name ?? '';
    if (this.state === 'stopped' && /^G[0-35]$/.test(name)) this.sendStopped();
    if (!this.settings.emergencyParser && /^M(112|410|108)$/.test(name) && text.startsWith('M'))
      this.atOnce(name);
  }

  private limpAt(): number | undefined {
    const { steppersHoldMs } = this.memory;
    if (steppersHoldMs === 0 || !this.stepper.idle || !this.mechanics.power.anyEnergised) return undefined;
    return this.stepper.lastMotionMs + steppersHoldMs;
  }

  private reportTemperature(): void {
    if (this.memory.temperatureEveryMs === 0 || this.nowMs < this.temperatureAtMs) return;
    this.send(` ${this.temperatureText()}`);
    this.temperatureAtMs = this.nowMs + this.memory.temperatureEveryMs;
  }

  private watchWire(): void {
    const { memory, settings, mechanics } = this;
    const watching =
      settings.wireSwitch && memory.jobRunning && memory.reportsMissingWire && this.state === 'running';
    if (!watching || memory.wireMissingTold || mechanics.wire.present) return;
    memory.wireMissingTold = true;
    this.send('//action:filament_runout T0');
    if (!memory.senderHandlesWire) this.send('echo:Unknown command: "M600"');
  }
}
