import { z } from 'zod';
import { EllwandError } from '@/lib/errors';
import { unknownKindOf } from '@/lib/protocol/unknown-kind';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';
import { parseInput } from '../parse';

const versioned = z.object({ protocol: z.number() });

/**
 * Parses what an agent sent; another version of the protocol, and a kind that only another version can know, are told
 * as that with the version spoken here, and not as a wrong field.
 * @throws EllwandError `protocol-unknown`, else as `parseInput`
 */
export function parseSpoken<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const spoken = versioned.safeParse(input);
  if (spoken.success && spoken.data.protocol !== PROTOCOL_VERSION) {
    throw new EllwandError('protocol-unknown', {
      details: { spoken: PROTOCOL_VERSION, heard: spoken.data.protocol },
    });
  }
  const parsed = schema.safeParse(input);
  if (parsed.success) return parsed.data;
  const unknown = unknownKindOf(parsed.error, input);
  if (unknown)
    throw new EllwandError('protocol-unknown', { details: { spoken: PROTOCOL_VERSION, ...unknown } });
  return parseInput(schema, input);
}
