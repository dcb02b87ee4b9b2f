import { describe, expect, it } from 'vitest';
import { choosePort, portFinder, type PortSeen, type RigPort } from '@/agent/link/ports';
import { usbPathIn } from '@/agent/link/usb-ports';

const CLONE = { vendorId: '1a86', productId: '7523' };
const seen = (path: string, over: Partial<PortSeen> = {}): PortSeen => ({
  path,
  ...CLONE,
  serialNumber: null,
  usbPath: null,
  ...over,
});
const left = seen('/dev/ttyUSB0', { usbPath: '1-1.1' });
const right = seen('/dev/ttyUSB1', { usbPath: '1-1.2' });
const board = seen('/dev/ttyACM0', { vendorId: '2341', productId: '0042', serialNumber: 'A5' });

const CURLEW: RigPort = { rig: 'Curlew', port: { ...CLONE, usbPath: '1-1.1' } };
const DUNLIN: RigPort = { rig: 'Dunlin', port: { ...CLONE, usbPath: '1-1.2' } };
const KNOT: RigPort = { rig: 'Knot', port: { vendorId: '2341', productId: '0042', serialNumber: 'A5' } };
const ANY_CLONE: RigPort = { rig: 'Curlew', port: CLONE };
const ROW = [CURLEW, DUNLIN, KNOT];

describe('a rig’s port', () => {
  it.each([
    ['by its socket', CURLEW, '/dev/ttyUSB0'],
    ['by its other socket', DUNLIN, '/dev/ttyUSB1'],
    ['by its serial number', KNOT, '/dev/ttyACM0'],
  ])('is found %s among boards that are alike', (_how, wanted, path) => {
    expect(choosePort(wanted, ROW, [left, right, board])).toEqual({ found: true, path });
  });

  it('that is not there may come yet; nothing has to be changed', () => {
    expect(choosePort(KNOT, ROW, [left])).toMatchObject({ found: false, refused: false });
  });

  it('that could be two is refused, with what tells them apart', () => {
    const bySocket = choosePort(ANY_CLONE, [ANY_CLONE], [left, right]);
    expect(bySocket).toMatchObject({ found: false, refused: true });
    expect(JSON.stringify(bySocket)).toMatch(/usbPath.*1-1\.1 or 1-1\.2/);
    const numbered = [
      seen('/dev/ttyUSB0', { serialNumber: 'A' }),
      seen('/dev/ttyUSB1', { serialNumber: 'B' }),
    ];
    expect(JSON.stringify(choosePort(ANY_CLONE, [ANY_CLONE], numbered))).toMatch(/serialNumber.*A or B/);
  });

  it('that another rig means, too, is refused for both, whichever way it is written', () => {
    const byPath: RigPort = { rig: 'Dunlin', port: '/dev/ttyUSB0' };
    for (const [wanted, other] of [
      [CURLEW, byPath],
      [byPath, CURLEW],
      [CURLEW, { ...ANY_CLONE, rig: 'Dunlin' }],
    ] as const) {
      const found = choosePort(wanted, [wanted, other], [left]);
      expect(found).toMatchObject({ found: false, refused: true });
      expect(JSON.stringify(found)).toContain(other.rig);
    }
  });

  it('has a reason that fits into a report', () => {
    const long = seen('/dev/ttyUSB0', { serialNumber: 'S'.repeat(40), usbPath: '10-1.2.3.4.5.6' });
    const wanted: RigPort = { rig: 'R', port: { ...CLONE, serialNumber: 'S'.repeat(40) } };
    const found = choosePort(wanted, [wanted], [long, { ...long, path: '/dev/ttyUSB1' }]);
    const reason = found.found ? '' : found.reason;
    expect(reason).toContain('in the configuration: both');
    expect(reason.length).toBeLessThanOrEqual(200);
  });
});

describe('the search for a port', () => {
  it('is made anew each time, so that a rig is found under another name', async () => {
    let ports = [left];
    const find = portFinder(CURLEW, ROW, () => Promise.resolve(ports));
    expect(await find()).toEqual({ found: true, path: '/dev/ttyUSB0' });
    ports = [];
    expect(await find()).toMatchObject({ found: false });
    ports = [{ ...left, path: '/dev/ttyUSB7' }];
    expect(await find()).toEqual({ found: true, path: '/dev/ttyUSB7' });
  });

  it('takes a path that is not listed as it is, and does not even list where all are paths', async () => {
    const failing = () => Promise.reject(new Error('no udevadm'));
    const byPath: RigPort = { rig: 'Knot', port: '/dev/ttyAMA0' };
    expect(await portFinder(byPath, [byPath], failing)()).toEqual({ found: true, path: '/dev/ttyAMA0' });
    expect(await portFinder(byPath, [byPath, CURLEW], failing)()).toMatchObject({ found: true });
    expect(await portFinder(CURLEW, ROW, failing)()).toMatchObject({
      refused: false,
      reason: expect.stringContaining('no udevadm') as string,
    });
  });
});

describe('a USB socket', () => {
  it.each([
    ['/sys/devices/pci0000:00/0000:00:14.0/usb1/1-1/1-1.4/1-1.4:1.0/ttyUSB0', '1-1.4'],
    ['/sys/devices/pci0000:00/0000:00:14.0/usb1/1-2/1-2:1.0', '1-2'],
    ['/sys/devices/platform/soc/fe980000.usb/usb3/3-1/3-1.2/3-1.2.1/3-1.2.1:1.1/tty/ttyACM0', '3-1.2.1'],
    ['/sys/devices/platform/serial8250', null],
  ])('is read from %s', (path, usbPath) => {
    expect(usbPathIn(path)).toBe(usbPath);
  });
});
