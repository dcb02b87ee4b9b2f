import { z } from 'zod';
import { LOG_FORMATS, LOG_LEVELS } from '@/agent/log';
import { describeWish, type PortWish } from '@/agent/link/ports';
import { isLoopback } from './loopback';

const usbNumber = z
  .string({ error: 'must be the four hexadecimal digits that "agent doctor" shows, as "1a86"' })
  .transform((digits) => digits.toLowerCase().replace(/^0x/, ''))
  .pipe(z.string().regex(/^[0-9a-f]{4}$/, 'must be four hexadecimal digits, as "1a86"'));

const identitySchema = z.strictObject({
  vendorId: usbNumber,
  productId: usbNumber,
  /** Many cheap boards have none, or all the same. */
  serialNumber: z.string().min(1).optional(),
  /** Tells boards apart that are the same in all else: the USB socket, as the system counts them. */
  usbPath: z
    .string()
    .regex(/^\d+-\d+(\.\d+)*$/, 'must be a USB socket as "agent doctor" shows it, as "1-1.4"')
    .optional(),
});

/** Said of a name that stands for nothing. */
export const UNKNOWN_NAME = 'is not known here: remove it or correct its name';

const PORT_WANTED =
  'must be a serial port, as "/dev/ttyUSB0", or { "vendorId": …, "productId": … } with "serialNumber" or "usbPath"';

/** By hand, not as a union: so every problem names its own line, and never both ways of writing a port. */
const portSchema = z.unknown().transform((given, ctx): PortWish => {
  if (typeof given === 'string' && given.length > 0) return given;
  if (given === null || typeof given !== 'object' || Array.isArray(given)) {
    ctx.addIssue({ code: 'custom', message: PORT_WANTED });
    return z.NEVER;
  }
  const parsed = identitySchema.safeParse(given);
  if (parsed.success) return parsed.data;
  for (const issue of parsed.error.issues) {
    const keys = issue.code === 'unrecognized_keys' ? issue.keys : [];
    for (const key of keys) ctx.addIssue({ code: 'custom', path: [key], message: UNKNOWN_NAME });
    if (keys.length === 0) ctx.addIssue({ code: 'custom', path: issue.path, message: issue.message });
  }
  return z.NEVER;
});

const rigSchema = z.strictObject({
  rig: z.string({ error: 'must be the name or id of a rig as in the set-up' }).min(1),
  port: portSchema,
});

const logSchema = z.strictObject({
  /** `auto`: text on a terminal, else lines of JSON, with the priority in front where they go to the journal. */
  format: z.enum(LOG_FORMATS, `must be one of ${LOG_FORMATS.join(', ')}`).default('auto'),
  level: z.enum(LOG_LEVELS, `must be one of ${LOG_LEVELS.join(', ')}`).default('info'),
});

/** The one file that an agent is told everything by. */
export const configSchema = z
  .strictObject({
    server: z
      .url({ protocol: /^https?$/, error: 'must be the address of the server, as "https://ellwand.example"' })
      .transform((address) => address.replace(/\/+$/, '')),
    /** Certificates (PEM) of an own authority that may vouch for the server, beside those that Node knows. */
    caFile: z.string({ error: 'must name a file with certificates in PEM' }).min(1).optional(),
    /** Token and counts travel readable by anybody on the network. */
    allowUnencrypted: z.boolean({ error: 'must be true or false' }).default(false),
    dataDir: z.string({ error: 'must name the folder in which the agent keeps its journal' }).min(1),
    pairingCode: z.string().min(8, 'must be the code from the set-up page, at least 8 characters').optional(),
    /** How many times as fast the agent waits. Above 1 it serves virtual rigs alone. */
    clockSpeed: z
      .number({ error: 'must be a number from 1, and only for virtual rigs' })
      .min(1, 'must be at least 1')
      .max(1_000, 'must be at most 1000')
      .default(1),
    log: logSchema.default({ format: 'auto', level: 'info' }),
    rigs: z
      .array(rigSchema, { error: 'must be a list of { "rig": …, "port": … }' })
      .min(1, 'must name at least one rig and its port')
      .max(64, 'must not name more than 64 rigs')
      .superRefine(refuseDoubles),
  })
  .superRefine(refuseOpenLine);

function refuseDoubles(rigs: { rig: string; port: PortWish }[], ctx: z.RefinementCtx): void {
  const seen = { rig: new Set<string>(), port: new Set<string>() };
  for (const [index, entry] of rigs.entries()) {
    const said = { rig: entry.rig, port: describeWish(entry.port) };
    for (const key of ['rig', 'port'] as const) {
      const message = 'is given twice: each rig has one port, each port one rig';
      if (seen[key].has(said[key])) ctx.addIssue({ code: 'custom', path: [index, key], message });
      seen[key].add(said[key]);
    }
  }
}

function refuseOpenLine(config: { server: string; allowUnencrypted: boolean }, ctx: z.RefinementCtx): void {
  // Another problem then, told already.
  if (!URL.canParse(config.server)) return;
  const { protocol, hostname } = new URL(config.server);
  if (protocol === 'https:' || isLoopback(hostname) || config.allowUnencrypted) return;
  const message =
    'must begin with "https://": the agent\'s token would be readable on the network. ' +
    'Where that is wanted all the same, add "allowUnencrypted": true';
  ctx.addIssue({ code: 'custom', path: ['server'], message });
}
