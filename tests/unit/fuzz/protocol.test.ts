import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { refusalOf } from '@/agent/uplink/refusal';
import { readStreamLine } from '@/agent/uplink/stream-lines';
import { EllwandError } from '@/lib/errors';
import * as commands from '@/lib/protocol/commands';
import * as events from '@/lib/protocol/events';
import * as pairing from '@/lib/protocol/pairing';
import * as report from '@/lib/protocol/report';
import * as signals from '@/lib/protocol/signals';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';
import { parseSpoken } from '@/lib/services/traffic/parse-spoken';
import { kindPlaces, shapeOf, valueOf, withExtras } from './messages';
import { SEED } from './seed';

/** Every schema of the contract, by its name. */
const SCHEMAS = Object.entries<unknown>({
  ...commands,
  ...events,
  ...pairing,
  ...report,
  ...signals,
}).flatMap(([name, value]): [string, z.ZodType][] => (value instanceof z.ZodType ? [[name, value]] : []));

/** Names that a later version may give a field, and some that a language keeps for itself. */
const fieldName = fc.oneof(
  fc.constantFrom(
    'weather',
    '__proto__',
    'constructor',
    'toString',
    'hasOwnProperty',
    'length',
    'kind2',
    '',
    '0',
  ),
  fc.string({ maxLength: 12 }),
);
const extras = fc.dictionary(fieldName, fc.jsonValue({ maxDepth: 2 }), { maxKeys: 3 });

/** As it comes over the network. */
const overTheWire = (message: unknown): unknown => JSON.parse(JSON.stringify(message));

/** What an agent sends, and the server reads with `parseSpoken`. */
const SPOKEN = [
  ['a report', report.reportSchema],
  ['an upload of events', events.eventUploadSchema],
  ['an answer to a command', commands.commandAnswerSchema],
] as const;

function refusalBy(schema: z.ZodType, message: unknown): { code: string; details: Record<string, unknown> } {
  try {
    parseSpoken(schema, overTheWire(message));
  } catch (error) {
    if (error instanceof EllwandError) return { code: error.code, details: error.details };
    throw error;
  }
  return { code: 'taken', details: {} };
}

const word = fc.oneof(fc.constantFrom('dance', '__proto__', 'constructor', ''), fc.string({ maxLength: 60 }));

describe('a message of the protocol', () => {
  it('is known to this test in every schema', () => {
    expect(SCHEMAS.length).toBeGreaterThan(20);
  });

  it.each(SCHEMAS)('may bear any further fields at any level: %s', (_name, schema) => {
    const shape = shapeOf(schema);
    fc.assert(
      fc.property(valueOf(shape), fc.infiniteStream(extras), (message, further) => {
        const plain = schema.parse(overTheWire(message));
        const extended = overTheWire(withExtras(shape, message, () => further.next().value));
        expect(schema.parse(extended)).toEqual(plain);
      }),
      { seed: SEED, numRuns: 50 },
    );
  });

  it.each(SPOKEN)(
    'of a kind that is not known is refused with the version, and the place: %s',
    (_name, schema) => {
      const shape = shapeOf(schema);
      const places = valueOf(shape).map((message) => kindPlaces(shape, message));
      const withPlace = places
        .filter((found) => found.length > 0)
        .chain((found) => fc.constantFrom(...found));
      fc.assert(
        fc.property(withPlace, word, ({ path, words, withWord }, unknown) => {
          fc.pre(!words.includes(unknown));
          const heard = unknown.slice(0, 40);
          const details = { spoken: PROTOCOL_VERSION, path, heard };
          expect(refusalBy(schema, withWord(unknown))).toEqual({ code: 'protocol-unknown', details });
        }),
        { seed: SEED, numRuns: 300 },
      );
    },
  );

  it('with a kind that is no word, or a known kind with a wrong field, is wrong and not of another version', () => {
    const upload = (body: unknown) => ({
      protocol: 1,
      journalId: '00000000-0000-4000-8000-000000000001',
      events: [{ sequence: 1, at: '2026-12-01T08:00:00Z', body }],
    });
    for (const body of [{ kind: 7 }, {}, null, { kind: 'guard-opened', rigId: 'none' }]) {
      expect(refusalBy(events.eventUploadSchema, upload(body)).code).toBe('bad-input');
    }
  });

  it.each([['a pairing', pairing.pairingSchema] as const, ...SPOKEN.slice(0, 2)])(
    'of another version is refused with both versions: %s',
    (_name, schema) => {
      fc.assert(
        fc.property(valueOf(shapeOf(schema)), fc.integer(), (message, heard) => {
          fc.pre(heard !== PROTOCOL_VERSION);
          const said = { ...(message as object), protocol: heard };
          const details = { spoken: PROTOCOL_VERSION, heard };
          expect(refusalBy(schema, said)).toEqual({ code: 'protocol-unknown', details });
        }),
        { seed: SEED, numRuns: 50 },
      );
    },
  );
});

describe('a command of a kind that the agent does not know', () => {
  const kinds = kindPlaces(shapeOf(commands.quietCommandSchema), { kind: 'stop' }).flatMap(
    ({ words }) => words,
  );

  it('is refused by its id, with the version that the agent speaks', () => {
    fc.assert(
      fc.property(valueOf(shapeOf(commands.quietCommandSchema)), word, extras, (command, kind, further) => {
        fc.pre(!kinds.includes(kind) && kind !== 'start-run' && kind !== 'go-on');
        const { id } = command as commands.QuietCommand;
        const line = JSON.stringify({
          line: 'command',
          command: { ...further, ...(command as object), kind },
        });
        expect(readStreamLine(line)).toEqual({ read: 'refuse', commandId: id, code: 'protocol-unknown' });
      }),
      { seed: SEED, numRuns: 500 },
    );
    const answer = refusalOf('protocol-unknown', '2026-12-01T08:00:00.000Z');
    expect(commands.commandAnswerSchema.parse(overTheWire(answer))).toMatchObject({
      code: 'protocol-unknown',
      details: { spoken: PROTOCOL_VERSION },
    });
  });
});
