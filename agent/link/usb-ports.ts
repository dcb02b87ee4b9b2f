import { realpath } from 'node:fs/promises';
import { basename, join } from 'node:path';
import { SerialPort } from 'serialport';
import type { ListPorts, PortSeen } from './ports';

const SYSFS_TTY = '/sys/class/tty';

/**
 * The serial ports of this computer, by udev. Needs `udevadm`. Ports without hardware behind them and
 * pseudo-terminals are not among them.
 */
export const listUsbPorts: ListPorts = async () => {
  const ports = await SerialPort.list();
  return Promise.all(
    ports.map(async (port): Promise<PortSeen> => ({
      path: port.path,
      vendorId: port.vendorId?.toLowerCase() ?? null,
      productId: port.productId?.toLowerCase() ?? null,
      serialNumber: port.serialNumber ?? null,
      usbPath: await usbPathOf(port.path),
    })),
  );
};

async function usbPathOf(path: string): Promise<string | null> {
  try {
    return usbPathIn(await realpath(join(SYSFS_TTY, basename(path), 'device')));
  } catch {
    return null;
  }
}

/**
 * The USB socket in the kernel's name of a device, as `1-1.4` in `…/usb1/1-1/1-1.4/1-1.4:1.0/ttyUSB0`: bus, then
 * ports through the hubs, before the interface. @returns null for a device that is not on USB
 */
export function usbPathIn(devicePath: string): string | null {
  return /\/(\d+-\d+(?:\.\d+)*):\d+\.\d+(?:\/|$)/.exec(devicePath)?.[1] ?? null;
}
