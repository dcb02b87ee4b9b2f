import { parseCommand } from './command';
import { commandTable, type Handler, type Run, type Wait } from './commands/table';
import type { Firmware } from './firmware';

/** Carries out the lines that were taken, one after another, and acknowledges each when it has ended. */
export class Executor {
  private running: Run | undefined;
  private wait: Wait | undefined;
  private stalledUntilMs = 0;
  private busyAtMs = 0;

  constructor(
    private readonly firmware: Firmware,
    private readonly keepaliveMs: number,
  ) {}

  get idle(): boolean {
    return this.running === undefined;
  }

  /** Forgets the command under way; it is never acknowledged. */
  clear(): void {
    this.clearRun();
    this.stalledUntilMs = 0;
  }

  /** Carries out nothing for `ms` of mechanical time. */
  stall(ms: number): void {
    this.stalledUntilMs = Math.max(this.stalledUntilMs, this.firmware.nowMs + ms);
  }

  /** @returns when the command under way wants to be looked at again; its moves wake it by themselves. */
  dueAt(): number | undefined {
    if (this.running === undefined) return undefined;
    return Math.min(this.busyAtMs, this.stalledUntil() ?? this.wait?.dueAt?.() ?? this.busyAtMs);
  }

  /** Carries out lines until one has to wait or none is left. */
  pump(): void {
    const { firmware } = this;
    while (firmware.answers) {
      firmware.receiver.read();
      const line = firmware.receiver.queue[0];
      if (line === undefined || !firmware.answers) return;
      this.running ??= this.start(line);
      if (this.stalledUntil() !== undefined || !this.proceed(this.running)) return;
    }
  }

  /** Says every keepalive that the command under way is not over. */
  keepAlive(): void {
    if (this.running === undefined || this.firmware.nowMs < this.busyAtMs) return;
    this.firmware.send(this.firmware.family.busy);
    this.busyAtMs = this.firmware.nowMs + this.keepaliveMs;
  }

  private start(line: string): Run {
    this.busyAtMs = this.firmware.nowMs + this.keepaliveMs;
    const command = parseCommand(line);
    return this.handlerOf(command.name)?.(this.firmware, command) ?? this.refuse(command.text);
  }

  private handlerOf(name: string | undefined): Handler | undefined {
    return name === undefined || this.firmware.family.lacks.has(name) ? undefined : commandTable.get(name);
  }

  private *refuse(text: string): Run {
    this.firmware.send(`echo:Unknown command: "${text}"`);
  }

  /** @returns whether the command has ended and been acknowledged. */
  private proceed(run: Run): boolean {
    if (this.wait !== undefined && !this.wait.isOver(this.firmware.nowMs)) return false;
    for (;;) {
      const step = run.next();
      if (this.running !== run) return false;
      if (step.done === true) {
        this.finish(typeof step.value === 'string' ? step.value : undefined);
        return true;
      }
      this.wait = step.value;
      if (!step.value.isOver(this.firmware.nowMs)) return false;
    }
  }

  private finish(answer: string | undefined): void {
    const { receiver, stepper, settings, family } = this.firmware;
    const line = receiver.queue.shift() ?? '';
    this.clearRun();
    if (family.acksOnReceipt) return;
    const number = /^N(\d+)/.exec(line)?.[1];
    const named = number === undefined ? '' : ` N${number}`;
    const details = settings.advancedOk ? `${named} P${stepper.freeSlots} B${receiver.freeLines - 1}` : '';
    this.firmware.send(answer ?? `ok${details}`);
  }

  private clearRun(): void {
    this.running = undefined;
    this.wait = undefined;
  }

  private stalledUntil(): number | undefined {
    return this.stalledUntilMs > this.firmware.nowMs ? this.stalledUntilMs : undefined;
  }
}
