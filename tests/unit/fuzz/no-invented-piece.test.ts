import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DIALECTS } from '@/agent/dialect/choose';
import { momentsOfARun, Overheard, type Moment } from './overheard';
import { chunk, TAG } from './serial-text';
import { SEED } from './seed';

const NOW_MS = Date.parse('2026-12-01T09:00:00.000Z');

/** What the rig really answers to the register line of a piece, and lines that are nearly that. */
const registerAnswer = fc
  .tuple(fc.constantFrom(170_000, 170_001, 170_002, 270_001), fc.constantFrom('\nok\n', '\nok', '\n', 'ok\n'))
  .map(([register, end]) => `X:0.00 Y:${register}.00 Z:5.50 E:0.00 Count X:0 Y:0 Z:550${end}`);

const noise = fc.array(
  fc.tuple(
    fc.oneof({ weight: 6, arbitrary: chunk }, { weight: 3, arbitrary: registerAnswer }),
    fc.constantFrom(0, 0, 0, 80, 120, 3_600),
  ),
  { minLength: 1, maxLength: 6 },
);

/** A position that shows this piece's number in the register stands somewhere in the text. */
function showsRegister(text: string, piece: number): boolean {
  return new RegExp(String.raw`Y:\s*0*${TAG * 10_000 + piece}(?:\.0+)?(?!\d)`).test(text);
}

/** As often one at which the register is being written or read as one at which it is not. */
function anyOf(moments: readonly Moment[]): fc.Arbitrary<Moment> {
  const nearCount = moments.filter(({ inFlight }) => inFlight.needs === 'position');
  return fc.oneof(fc.constantFrom(...moments), fc.constantFrom(...nearCount));
}

/** How many cases counted a piece; none of them did so without `proof` among the bytes heard until then. */
async function countedBy(
  moments: readonly Moment[],
  proof: (heard: string, piece: number) => boolean,
  numRuns: number,
): Promise<number> {
  let counted = 0;
  await fc.assert(
    fc.asyncProperty(anyOf(moments), fc.constantFrom(...DIALECTS), noise, async (moment, dialect, said) => {
      const rig = new Overheard(moment, dialect, NOW_MS);
      await rig.hear(said);
      for (const [index, event] of rig.events.entries()) {
        if (event.kind !== 'piece-cut') continue;
        counted += 1;
        expect(proof(rig.heard.slice(0, rig.heardAt[index]), event.piece)).toBe(true);
      }
    }),
    { seed: SEED, numRuns },
  );
  return counted;
}

describe('any bytes from the rig in the middle of a run', () => {
  it('count no piece unless its number in this run’s register is really among them', async () => {
    const moments = momentsOfARun('Y');
    expect(moments.length).toBeGreaterThan(30);
    // Enough of the cases do count one: the property is not true of silence alone.
    const counted = await countedBy(moments, showsRegister, 14_000);
    expect(counted).toBeGreaterThan(100);
  });

  it('count no piece of a rig without a register unless it acknowledged a line', async () => {
    const counted = await countedBy(
      momentsOfARun(null),
      (heard) => /(^|[\r\n])(ok|skip|Resend|rs)/.test(heard),
      3_000,
    );
    expect(counted).toBeGreaterThan(10);
  });
});
