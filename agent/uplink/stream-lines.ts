import { z } from 'zod';
import type { ErrorCode } from '@/lib/errors';
import { commandSchema, streamLineSchema, type StreamLine } from '@/lib/protocol/commands';

/** A longer line is dropped whole. */
const LINE_MAX_CHARS = 64_000;

/** Puts lines together from pieces that are split anywhere. Empty lines are left out. */
export class LineAssembler {
  #rest = '';
  #dropping = false;
  #decoder = new TextDecoder();

  /** @returns the lines that this piece completes; null stands for one that was too long */
  take(piece: Uint8Array): (string | null)[] {
    const parts = this.#decoder.decode(piece, { stream: true }).split('\n');
    const lines: (string | null)[] = [];
    for (const [index, part] of parts.entries()) {
      this.#grow(part);
      if (index < parts.length - 1) lines.push(this.#end());
    }
    return lines.filter((line) => line !== '');
  }

  #grow(part: string): void {
    if (!this.#dropping) this.#rest += part;
    if (this.#rest.length <= LINE_MAX_CHARS) return;
    this.#dropping = true;
    this.#rest = '';
  }

  #end(): string | null {
    const line = this.#dropping ? null : this.#rest.trim();
    this.#dropping = false;
    this.#rest = '';
    return line;
  }
}

export type ReadLine =
  | { read: 'line'; line: StreamLine }
  /** A command that this software cannot carry out, to be refused by its id. */
  | { read: 'refuse'; commandId: string; code: Extract<ErrorCode, 'protocol-unknown' | 'bad-input'> }
  | { read: 'other-protocol' }
  | { read: 'nothing' };

const anyCommandSchema = z.object({
  line: z.literal('command'),
  command: z.object({ id: z.uuid(), kind: z.string() }),
});
const anyHelloSchema = z.object({ line: z.literal('hello'), protocol: z.number() });

const kinds = new Set(
  commandSchema.options.flatMap((group) => group.options.flatMap((option) => [...option.shape.kind.values])),
);

/** Reads one line of the command stream; what this software does not know never throws. */
export function readStreamLine(text: string): ReadLine {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    return { read: 'nothing' };
  }
  const line = streamLineSchema.safeParse(value);
  if (line.success) return { read: 'line', line: line.data };
  const command = anyCommandSchema.safeParse(value);
  if (command.success) {
    const { id, kind } = command.data.command;
    const known = [...kinds].some((name) => name === kind);
    return { read: 'refuse', commandId: id, code: known ? 'bad-input' : 'protocol-unknown' };
  }
  return { read: anyHelloSchema.safeParse(value).success ? 'other-protocol' : 'nothing' };
}
