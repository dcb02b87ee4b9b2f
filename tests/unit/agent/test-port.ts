import { PortClosed, type Port } from '@/agent/link/port';

/** A port whose other end is the test: `answer` says what comes for each line written. */
export class TestPort implements Port {
  isOpen = true;
  readonly written: string[] = [];
  #hear: (text: string) => void = () => undefined;
  #closed: (reason: string) => void = () => undefined;
  constructor(private readonly answer: (line: string) => string | null = () => null) {}
  write(text: string): void {
    if (!this.isOpen) throw new PortClosed();
    this.written.push(text);
    const answer = this.answer(text);
    if (answer !== null) queueMicrotask(() => this.#hear(answer));
  }
  onData(listener: (text: string) => void): void {
    this.#hear = listener;
  }
  onClose(listener: (reason: string) => void): void {
    this.#closed = listener;
  }
  say(text: string): void {
    this.#hear(text);
  }
  close(): Promise<void> {
    this.isOpen = false;
    this.#closed('closed');
    return Promise.resolve();
  }
}
