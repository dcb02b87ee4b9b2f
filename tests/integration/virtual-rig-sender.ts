import { ReadlineParser, SerialPort } from 'serialport';

/** A sender of one line at a time, numbered and checked, as plain as can be. */
export class Sender {
  private readonly port: SerialPort;
  private readonly heard: string[] = [];
  private waiting: (() => void) | undefined;
  private number = 0;

  constructor(path: string) {
    this.port = new SerialPort({ path, baudRate: 115200, hupcl: false, autoOpen: false });
    this.port.on('error', () => undefined);
    this.port.pipe(new ReadlineParser({ delimiter: '\n' })).on('data', (line: string) => {
      this.heard.push(line);
      this.waiting?.();
    });
  }

  async open(): Promise<void> {
    await new Promise<void>((resolve, reject) => {
      this.port.open((error) => (error ? reject(error) : resolve()));
    });
  }

  async close(): Promise<void> {
    if (!this.port.isOpen) return;
    await new Promise<void>((resolve) => this.port.close(() => resolve()));
  }

  /** @returns all lines up to the first that fits. */
  async hear(wanted: RegExp): Promise<string[]> {
    for (;;) {
      const at = this.heard.findIndex((line) => wanted.test(line));
      if (at >= 0) return this.heard.splice(0, at + 1);
      await new Promise<void>((resolve) => (this.waiting = resolve));
    }
  }

  async reset(): Promise<void> {
    this.port.write('N0 M110 N0*125\n');
    await this.hear(/^ok/);
    this.number = 0;
  }

  async run(command: string): Promise<string[]> {
    this.number += 1;
    const text = `N${this.number} ${command}`;
    const sum = [...Buffer.from(text)].reduce((xor, byte) => xor ^ byte, 0);
    this.port.write(`${text}*${sum}\n`);
    return this.hear(/^ok/);
  }

  async runAll(...commands: string[]): Promise<void> {
    for (const command of commands) await this.run(command);
  }
}
