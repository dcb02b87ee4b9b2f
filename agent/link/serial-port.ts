import { SerialPort } from 'serialport';
import { PortClosed, type OpenPort, type Port } from './port';

/** More bytes than this unsent mean that nobody takes them; one line in flight needs under 100. */
const UNSENT_BYTES_MAX = 1024;
const READ_BUFFER_BYTES = 4096;

/**
 * Opens a real serial port. It is locked against a second opener and does not hang up when closed, so a board that
 * resets only on a hang-up keeps its register.
 */
export const openSerialPort: OpenPort = ({ path, baudRate }) =>
  new Promise((resolve, reject) => {
    const serial = new SerialPort({
      path,
      baudRate,
      autoOpen: false,
      lock: true,
      hupcl: false,
      highWaterMark: READ_BUFFER_BYTES,
    });
    serial.open((error) => {
      if (error) reject(error);
      else resolve(wrap(serial));
    });
  });

function wrap(serial: SerialPort): Port {
  const closeListeners: ((reason: string) => void)[] = [];
  let closedBecause: string | null = null;
  const close = (reason: string) => {
    if (closedBecause !== null) return;
    closedBecause = reason;
    for (const listener of closeListeners) listener(reason);
  };
  serial.on('close', (error: Error | null) => close(error ? error.message : 'closed'));
  // Modem lines do not exist on pseudo-terminals: an error there is no reason to let go of the port.
  serial.on('error', (error) => {
    if (!serial.isOpen) close(error.message);
  });
  return {
    get isOpen() {
      return closedBecause === null && serial.isOpen;
    },
    write(text) {
      if (closedBecause !== null || !serial.isOpen) throw new PortClosed();
      if (serial.writableLength + text.length > UNSENT_BYTES_MAX) throw new PortClosed();
      serial.write(text, 'latin1');
    },
    onData(listener) {
      serial.on('data', (chunk: Buffer) => {
        if (closedBecause === null) listener(chunk.toString('latin1'));
      });
    },
    onClose(listener) {
      if (closedBecause === null) closeListeners.push(listener);
      else listener(closedBecause);
    },
    close: () => closeSerial(serial, close),
  };
}

function closeSerial(serial: SerialPort, close: (reason: string) => void): Promise<void> {
  return new Promise((resolve) => {
    close('closed');
    if (!serial.isOpen) {
      resolve();
      return;
    }
    serial.close(() => resolve());
  });
}
