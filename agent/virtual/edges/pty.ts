import { spawn, type ChildProcessWithoutNullStreams } from 'node:child_process';
import { lstatSync, mkdirSync, renameSync, rmSync, symlinkSync } from 'node:fs';
import { dirname } from 'node:path';

/**
 * One socat for each opening: it makes a pseudo-terminal, waits until somebody opens it, and ends when it is
 * closed. A waiting socat does not look at its input, so it is told to die with this process even when that is
 * killed. `-t 0` ends it at once, else it would swallow the first half second of the next opening; the poll
 * interval is how long an opening can stay unnoticed.
 */
const SOCAT = ['socat', '-t', '0', '-d', '-d', 'PTY,rawer,wait-slave,pty-interval=0.02', 'STDIO'];

/** Answers that nobody reads are dropped beyond this, as a board would. */
const UNREAD_BYTES = 65_536;

/** Between two attempts when socat itself fails. */
const RETRY_MS = 250;

/** What the far end of the cable does. Text has one character a byte. */
export interface PtyEvents {
  opened: () => void;
  received: (text: string) => void;
  closed: () => void;
  failed: (error: Error) => void;
}

/** A serial port that is not one: a path that a program opens, and this end of it. */
export class Pty {
  private child: ChildProcessWithoutNullStreams | undefined;
  private retry: NodeJS.Timeout | undefined;
  private plugged = false;
  private isOpen = false;
  private waiting: { resolve: () => void; reject: (error: Error) => void }[] = [];

  constructor(
    private path: string,
    private readonly events: PtyEvents,
  ) {}

  /** Makes the path appear, under another name if one is given. @returns when it is there. @throws where socat is missing. */
  plug(path = this.path): Promise<void> {
    this.path = path;
    if (this.plugged) return Promise.resolve();
    this.plugged = true;
    return new Promise((resolve, reject) => {
      this.waiting.push({ resolve, reject });
      this.start();
    });
  }

  /** Pulls the cable: whoever has the port open loses it, the path goes. @returns when it is gone. */
  async unplug(): Promise<void> {
    this.plugged = false;
    clearTimeout(this.retry);
    const child = this.child;
    if (child === undefined) return;
    await new Promise<void>((resolve) => {
      child.once('close', () => resolve());
      child.kill('SIGTERM');
    });
  }

  /** Sends to whoever has the port open; nobody, and it is lost. */
  send(text: string): void {
    const input = this.child?.stdin;
    if (!this.isOpen || input === undefined || !input.writable || input.writableLength > UNREAD_BYTES) return;
    input.write(text, 'latin1');
  }

  private start(): void {
    const child = spawn('setpriv', ['--pdeathsig', 'TERM', ...SOCAT], {
      stdio: ['pipe', 'pipe', 'pipe'],
      detached: true,
    });
    this.child = child;
    let report = '';
    child.stdout.setEncoding('latin1').on('data', (text: string) => {
      this.noteOpen();
      this.events.received(text);
    });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      report = (report + text).slice(-2000);
      this.readReport(report);
      report = report.slice(report.lastIndexOf('\n') + 1);
    });
    child.stdin.on('error', () => undefined);
    child.on('error', (cause) => this.fail(new Error('socat does not start', { cause })));
    child.on('close', () => this.ended(child));
  }

  private readReport(report: string): void {
    const device = /PTY is (\/\S+)\n/.exec(report)?.[1];
    if (device !== undefined) this.link(device);
    if (report.includes('starting data transfer')) this.noteOpen();
  }

  private link(device: string): void {
    mkdirSync(dirname(this.path), { recursive: true });
    const fresh = `${this.path}.new`;
    rmSync(fresh, { force: true });
    symlinkSync(device, fresh);
    renameSync(fresh, this.path);
    for (const { resolve } of this.waiting.splice(0)) resolve();
  }

  private noteOpen(): void {
    if (this.isOpen) return;
    this.isOpen = true;
    this.events.opened();
  }

  private fail(error: Error): void {
    for (const { reject } of this.waiting.splice(0)) reject(error);
    this.events.failed(error);
  }

  private ended(child: ChildProcessWithoutNullStreams): void {
    if (this.child !== child) return;
    this.child = undefined;
    removeLink(this.path);
    const wasOpen = this.isOpen;
    this.isOpen = false;
    if (wasOpen) this.events.closed();
    if (!this.plugged) return;
    if (wasOpen) this.start();
    else this.retry = setTimeout(() => this.start(), RETRY_MS);
  }
}

function removeLink(path: string): void {
  if (lstatSync(path, { throwIfNoEntry: false })?.isSymbolicLink() === true) rmSync(path);
}
