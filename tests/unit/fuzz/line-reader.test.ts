import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DIALECTS } from '@/agent/dialect/choose';
import { identify, refusalOfStranger } from '@/agent/dialect/identity';
import { beginExchange, stepExchange } from '@/agent/link/exchange';
import { createSplitter } from '@/agent/link/splitter';
import { firmwareSchema } from '@/lib/protocol/report';
import { bytes, chunk } from './serial-text';
import { SEED } from './seed';

/** Characters of one line that are kept. */
const LINE_MOST = 512;
/** Replies of one exchange that are kept. */
const REPLIES_MOST = 64;

function linesOf(chunks: readonly string[]): string[] {
  const splitter = createSplitter();
  return chunks.flatMap((text) => splitter.push(text));
}

/** The text in pieces that end at the places given. */
function cutAt(text: string, places: readonly number[]): string[] {
  const ends = [...places.map((place) => place % (text.length + 1)).sort((a, b) => a - b), text.length];
  return ends.map((end, index) => text.slice(index === 0 ? 0 : ends[index - 1], end));
}

const text = fc.array(chunk, { maxLength: 5 }).map((chunks) => chunks.join(''));

describe('the line reader, on any bytes', () => {
  it('gives the same lines whatever the split', () => {
    const cuts = fc.array(fc.nat({ max: 4_000 }), { maxLength: 6 });
    fc.assert(
      fc.property(text, cuts, (whole, places) => {
        expect(linesOf(cutAt(whole, places))).toEqual(linesOf([whole]));
      }),
      { seed: SEED, numRuns: 15_000 },
    );
  });

  it('gives no line longer than 512 characters, keeps no more than that, and leaves nothing out but line ends', () => {
    fc.assert(
      fc.property(text, (whole) => {
        const splitter = createSplitter();
        const lines = splitter.push(whole);
        const rest = splitter.push('\n');
        expect(rest.length).toBeLessThanOrEqual(1);
        expect([...lines, ...rest].every((line) => line.length <= LINE_MOST && !/[\r\n]/.test(line))).toBe(
          true,
        );
        expect([...lines, ...rest].join('')).toBe(whole.replace(/[\r\n]/g, ''));
      }),
      { seed: SEED, numRuns: 10_000 },
    );
  });
});

describe.each(DIALECTS.map((dialect) => [dialect.name, dialect] as const))(
  'the dialect of %s',
  (_name, dialect) => {
    it('reads any line, keeps its text, and makes no number of what is none', () => {
      fc.assert(
        fc.property(fc.oneof(chunk, bytes), (line) => {
          const reply = dialect.read(line);
          expect(reply.text).toBe(line);
          const numbers = JSON.stringify(reply, (_key, value: unknown) =>
            typeof value === 'number' && !Number.isFinite(value) ? 'no number' : value,
          );
          expect(numbers.includes('"no number"')).toBe(line.includes('no number'));
        }),
        { seed: SEED, numRuns: 26_000 },
      );
    });

    it('keeps a line in flight within bounds: 64 replies, and no more writing than its rounds allow', () => {
      const moment = fc.tuple(chunk, fc.constantFrom(0, 1, 80, 110, 4_000));
      fc.assert(
        fc.property(fc.array(moment, { maxLength: 90, size: 'max' }), (moments) => {
          const order = {
            line: 10,
            command: 'M114',
            expectedMs: 500,
            needs: 'position',
            keepaliveSeen: false,
          } as const;
          const manner = { ...dialect, numbered: true };
          let { exchange } = beginExchange({ ...order, manner }, 0);
          let nowMs = 0;
          let written = 0;
          for (const [heard, waitMs] of moments) {
            const after = stepExchange(exchange, { type: 'reply', reply: dialect.read(heard), nowMs });
            nowMs += waitMs;
            const later = after.end ? after : stepExchange(after.exchange, { type: 'deadline', nowMs });
            written += [after, later].filter((step) => step.write !== undefined).length;
            exchange = later.exchange;
            expect(exchange.replies.length).toBeLessThanOrEqual(REPLIES_MOST);
            if (after.end ?? later.end) break;
          }
          // Six resends, and three silences of a newline and a line each.
          expect(written).toBeLessThanOrEqual(6 + 2 * 3 + 1);
        }),
        { seed: SEED, numRuns: 500 },
      );
    });
  },
);

describe('what a board calls itself', () => {
  it('is told apart without a crash, and fits the report to the server', () => {
    fc.assert(
      fc.property(fc.oneof(chunk, bytes), fc.boolean(), (line, banner) => {
        const found = identify(`FIRMWARE_NAME:${line}`, {}, banner);
        if (found.known) expect(firmwareSchema.safeParse(found.firmware).success).toBe(true);
        else expect(found.reason.length).toBeLessThanOrEqual(200);
        expect(refusalOfStranger(line)?.length ?? 0).toBeLessThanOrEqual(200);
      }),
      { seed: SEED, numRuns: 5_000 },
    );
  });
});
