/** A serial port that is there now. Identity is told of USB ports alone; hexadecimal numbers have four small digits. */
export interface PortSeen {
  path: string;
  vendorId: string | null;
  productId: string | null;
  serialNumber: string | null;
  /** The USB socket it is plugged into, through all hubs, as the system counts them: `1-1.4`. */
  usbPath: string | null;
}

/** Lists the ports that are there now; rejects with the system's reason when it cannot. */
export type ListPorts = () => Promise<PortSeen[]>;

/** How a board is known again under whatever name its port has today. */
export interface PortIdentity {
  vendorId: string;
  productId: string;
  serialNumber?: string;
  usbPath?: string;
}

/** A path that never changes, or an identity that is looked for at every opening. */
export type PortWish = string | PortIdentity;

/** `refused`: a person must change something; else the port may come by itself. */
export type FoundPort = { found: true; path: string } | { found: false; refused: boolean; reason: string };

export type FindPort = () => Promise<FoundPort>;

/** Which port a rig's wish means. `rig` as the configuration names it. */
export interface RigPort {
  rig: string;
  port: PortWish;
}

function matches(wish: PortWish, seen: PortSeen): boolean {
  if (typeof wish === 'string') return wish === seen.path;
  return (
    wish.vendorId === seen.vendorId &&
    wish.productId === seen.productId &&
    (wish.serialNumber === undefined || wish.serialNumber === seen.serialNumber) &&
    (wish.usbPath === undefined || wish.usbPath === seen.usbPath)
  );
}

/** A wish in a person's words. */
export function describeWish(wish: PortWish): string {
  if (typeof wish === 'string') return wish;
  const { vendorId, productId, serialNumber, usbPath } = wish;
  const serial = serialNumber === undefined ? '' : ` with serial number ${serialNumber}`;
  const place = usbPath === undefined ? '' : ` in USB socket ${usbPath}`;
  return `USB ${vendorId}:${productId}${serial}${place}`;
}

/** The rigs of the configuration that mean this port. */
export function rigsMeaning(seen: PortSeen, rigs: readonly RigPort[]): string[] {
  return rigs.filter(({ port }) => matches(port, seen)).map(({ rig }) => rig);
}

/** The port that `wanted` means among those that are there, or why none; `rigs` are all of the configuration. */
export function choosePort(wanted: RigPort, rigs: readonly RigPort[], ports: readonly PortSeen[]): FoundPort {
  const candidates = ports.filter((seen) => matches(wanted.port, seen));
  const [only, second] = candidates;
  if (!only) {
    const reason = `No port is ${describeWish(wanted.port)}. Look at its cable and power.`;
    return { found: false, refused: false, reason };
  }
  if (second) return refused(tooMany(wanted.port, only, second));
  const others = rigsMeaning(only, rigs).filter((rig) => rig !== wanted.rig);
  if (others.length === 0) return { found: true, path: only.path };
  return refused(
    `${only.path} is meant for "${others.join('", "')}" too. Give each rig in the configuration a port of its own.`,
  );
}

function refused(reason: string): FoundPort {
  return { found: false, refused: true, reason };
}

function tooMany(wish: PortWish, one: PortSeen, other: PortSeen): string {
  const add =
    one.serialNumber !== null && one.serialNumber !== other.serialNumber
      ? `"serialNumber" (${one.serialNumber} or ${other.serialNumber})`
      : `"usbPath" (${one.usbPath ?? 'unknown'} or ${other.usbPath ?? 'unknown'})`;
  // What to do comes first: the server keeps 200 characters of it.
  return `Add ${add} to its port in the configuration: both ${one.path} and ${other.path} are ${describeWish(wish)}.`;
}

/** Looks for a rig's port anew each time; a path is taken as it is, unless another rig's identity means it too. */
export function portFinder(wanted: RigPort, rigs: readonly RigPort[], listPorts: ListPorts): FindPort {
  const { port } = wanted;
  if (typeof port === 'string' && rigs.every((rig) => typeof rig.port === 'string')) {
    return () => Promise.resolve({ found: true, path: port });
  }
  return async () => {
    const ports = await listed(listPorts);
    if (typeof ports === 'string') {
      if (typeof port === 'string') return { found: true, path: port };
      return { found: false, refused: false, reason: `The ports cannot be listed: ${ports}` };
    }
    const unlisted = typeof port === 'string' && !ports.some((seen) => seen.path === port);
    return unlisted ? { found: true, path: port } : choosePort(wanted, rigs, ports);
  };
}

async function listed(listPorts: ListPorts): Promise<PortSeen[] | string> {
  try {
    return await listPorts();
  } catch (error) {
    return error instanceof Error ? error.message : 'no reason was given.';
  }
}
