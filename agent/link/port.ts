/** An open serial line. Once closed it stays closed: what was queued is dropped, never sent later. */
export interface Port {
  /** Writes at once. @throws PortClosed when the port is closed or does not take any more bytes. */
  write(text: string): void;
  onData(listener: (text: string) => void): void;
  /** Told once, with the reason; also when `close` was called. */
  onClose(listener: (reason: string) => void): void;
  readonly isOpen: boolean;
  close(): Promise<void>;
}

export interface PortOptions {
  path: string;
  baudRate: number;
}

/** Opens a port; rejects with the system's reason when it cannot. */
export type OpenPort = (options: PortOptions) => Promise<Port>;

/** A line was to be written to a port that takes none. */
export class PortClosed extends Error {
  constructor() {
    super('the port is closed');
    this.name = 'PortClosed';
  }
}
