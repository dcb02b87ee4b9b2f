import { describe, expect, it } from 'vitest';
import type { CoreRequest } from '@/agent/virtual/core/controls';
import { readReply } from '@/agent/dialect/reply';
import { bareProfile, drivenRig, type DrivenRig } from './driven-rig';
import { LinkedRig, type LinkedOptions } from './linked-rig';

const PIECES = 4;

/** Every piece was cut, none is counted twice, and none is counted that the jaws did not make. */
function everyPieceOnce(rig: LinkedRig): void {
  const byPeople = rig.settled.filter((answer) => answer === 'count').length;
  expect(rig.counted.length + byPeople).toBe(PIECES);
  expect(new Set(rig.counted).size).toBe(rig.counted.length);
  expect(rig.goodPieces).toBeGreaterThanOrEqual(PIECES);
}

async function inSecondPiece(options: LinkedOptions): Promise<LinkedRig> {
  const rig = new LinkedRig({ pieces: PIECES, ...options });
  await rig.start();
  await rig.until(() => rig.counted.length === 1);
  return rig;
}

describe.each(['marlin', 'repetier'] as const)('a run at firmware of the family %s', (family) => {
  const rig = { firmware: { family } };

  it('cuts and counts every piece once over feeds of several moves', async () => {
    const at = new LinkedRig({ pieces: PIECES, lengthMm: 400, rig });
    await at.start();
    await at.stands();
    expect(at.counted).toEqual([1, 2, 3, 4]);
    expect([at.goodPieces, at.closings.length]).toEqual([4, 5]);
    expect(at.failures).toEqual([]);
  });

  it.each<[pitfall: string, request: CoreRequest]>([
    ['lost oks', { do: 'ok', fault: 'swallow', count: 3 }],
    ['doubled oks', { do: 'ok', fault: 'double', count: 8 }],
    ['oks split over reads', { do: 'ok', fault: 'split', count: 12 }],
    ['minutes of busy', { do: 'busy', ms: 300_000 }],
  ])('survives %s without a hold', async (_pitfall, request) => {
    const at = await inSecondPiece({ rig });
    at.control(request);
    await at.stands();
    expect(at.summary()).toMatch(/^ended/);
    everyPieceOnce(at);
    expect(at.closings).toHaveLength(PIECES + 1);
  });

  it.each<[pitfall: string, request: Extract<CoreRequest, { do: 'noise' }>]>([
    [
      'bits flipped towards the rig',
      { do: 'noise', kind: 'flip', direction: 'in', bytes: 800, probability: 0.01 },
    ],
    [
      'bytes dropped towards the rig',
      { do: 'noise', kind: 'drop', direction: 'in', bytes: 800, probability: 0.01 },
    ],
    [
      'bytes doubled towards the rig',
      { do: 'noise', kind: 'double', direction: 'in', bytes: 800, probability: 0.01 },
    ],
    [
      'text glued and cut on its way back',
      { do: 'noise', kind: 'drop', direction: 'out', bytes: 800, probability: 0.02 },
    ],
    [
      'text damaged on its way back',
      { do: 'noise', kind: 'flip', direction: 'out', bytes: 800, probability: 0.02 },
    ],
  ])('survives %s, whatever it is held for', async (_pitfall, request) => {
    for (let seed = 1; seed <= 6; seed += 1) {
      const at = await inSecondPiece({ rig: { ...rig, seed } });
      at.control(request);
      await at.finish();
      everyPieceOnce(at);
    }
  });

  it('is held when the peer dies without a close, and found again with nothing lost', async () => {
    const at = await inSecondPiece({ rig });
    at.control({ do: 'mute', ms: 120_000 });
    const sinceMs = at.clock.nowMs();
    await at.stands();
    expect([at.driven.run.hold, at.failures]).toEqual(['link-lost', ['silent']]);
    expect(at.clock.nowMs() - sinceMs).toBeLessThan(30_000);
    await at.pass(120_000);
    await at.finish();
    everyPieceOnce(at);
    expect(at.settled).toEqual([]);
  });

  it.each([/^N\d+ G1 E/, /^N\d+ G1 Z5\.5/, /^N\d+ M400/, /^N\d+ M114/, /^N\d+ G92 Y17/, /^N\d+ G1 Z8/])(
    'never goes on across a banner in mid-run, the line %s cut by the reset',
    async (line) => {
      const at = await inSecondPiece({ rig });
      let closings = 0;
      at.onLine = (written) => {
        if (!line.test(written)) return;
        at.onLine = () => undefined;
        // Half of the line is there when the board begins anew.
        at.damage = (text) => {
          at.damage = (later) => later;
          at.control({ do: 'reset' });
          closings = at.closings.length;
          return text.slice(text.length / 2);
        };
      };
      await at.stands();
      expect(['firmware-reset', 'doubt']).toContain(at.driven.run.hold);
      expect(at.closings).toHaveLength(closings);
      const homesBefore = at.tally.filter(({ kind }) => kind === 'homed').length;
      await at.finish();
      everyPieceOnce(at);
      expect(at.tally.filter(({ kind }) => kind === 'homed')).toHaveLength(homesBefore + 1);
    },
  );

  it('is held by firmware that has stopped on an error, until its reset', async () => {
    const at = await inSecondPiece({ rig });
    at.control({ do: 'error-stop' });
    await at.stands();
    expect(at.failures).toEqual(['halted']);
    at.control({ do: 'reset' });
    await at.finish();
    everyPieceOnce(at);
  });

  it.each([
    ['cold', (at: LinkedRig) => (at.core.firmware.memory.coldFeedAllowed = false)],
    ['too long', (at: LinkedRig) => (at.core.firmware.settings.longestFeedMm = 30)],
  ])('counts no piece whose feed was refused as %s, and cuts it anew', async (_why, spoil) => {
    const at = await inSecondPiece({ rig });
    spoil(at);
    await at.stands();
    expect(at.driven.run.hold).toBe('firmware-refused');
    expect(at.counted).toHaveLength(at.goodPieces);
    at.core.firmware.settings.longestFeedMm = 200;
    await at.finish();
    everyPieceOnce(at);
  });

  it('counts no piece whose cut became an unknown command by two flips of one bit', async () => {
    const at = await inSecondPiece({ rig });
    let flipped = false;
    at.damage = (text) => {
      if (flipped || !/ G1 Z5\.5 F/.test(text)) return text;
      flipped = true;
      // G and F lose the same bit: the checksum notices nothing.
      return text.replace('G1', 'C1').replace(' F', ' B');
    };
    await at.stands();
    expect(at.driven.run.hold).toBe('firmware-refused');
    expect(at.counted).toHaveLength(at.goodPieces);
    await at.finish();
    everyPieceOnce(at);
  });

  it('counts no piece whose cut was clipped at the end stop', async () => {
    const at = await inSecondPiece({ rig });
    at.core.firmware.memory.softStops = true;
    await at.stands();
    expect(at.driven.run.hold).toBe('position-wrong');
    expect(at.counted).toHaveLength(at.goodPieces);
  });
});

describe('the wire switch', () => {
  it('that reads TRIGGERED when wire is present lets the run go on, and holds it when wire is missing', async () => {
    const profile = { ...bareProfile, fitted: { ...bareProfile.fitted, wireSwitch: true } };
    const at = await inSecondPiece({ profile });
    expect(at.driven.state.signals.wire.reading).toBe('present');
    await at.until(() => at.counted.length === 2);
    at.control({ do: 'wire', out: true });
    await at.stands();
    expect(at.driven.run.hold).toBe('wire-missing');
  });
});

describe('a rig that is not believed', () => {
  const ORDER = { pieces: 3, lengthMm: 200 };

  /** In its second piece, the jaws shut, `M114` in flight. */
  function atTheQuestion(): DrivenRig {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170001/);
    rig.driveTo(/^G1 Z5\.5/);
    rig.driveTo(/^M114/);
    return rig;
  }

  it('counts no cut that was clipped at the end stop: the steps in M114 show it, the coordinate does not', () => {
    const rig = atTheQuestion();
    rig.stepsShort = 3;
    rig.driveTo(null);
    expect(rig.run.hold).toBe('position-wrong');
    expect(rig.said('piece-cut')).toHaveLength(1);
  });

  it('is asked again when its report was cut before the steps', () => {
    const rig = atTheQuestion();
    const told = readReply('X:0.00 Y:170001.00 Z:5.50 E:2');
    rig.happens({ type: 'answered', sure: true, replies: [told, readReply('ok')] });
    expect([rig.run.mode, rig.sent.at(-1)]).toEqual(['moving', 'M114']);
    rig.driveTo(null);
    expect(rig.said('piece-cut')).toHaveLength(3);
  });

  it('has its register written again when a digit too many made the feed 1 in place of 0', () => {
    const rig = atTheQuestion();
    rig.driveTo(/^G92 Y170002/);
    const told = readReply('X:0.00 Y:170002.00 Z:5.50 E:1.00 Count X:0 Y:0 Z:550');
    rig.happens({ type: 'answered', sure: true, replies: [told, readReply('ok')] });
    expect(rig.said('piece-cut')).toHaveLength(1);
    expect(rig.sent.slice(-2)).toEqual(['G92 Y170002 E0', 'G92 Y170002 E0']);
  });

  it('moves by no home position that it does not show', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Z10/);
    const told = readReply('X:0.00 Y:0.00 Z:105.00 E:0.00 Count X:0 Y:0 Z:0');
    rig.happens({ type: 'answered', sure: true, replies: [told, readReply('ok')] });
    expect(rig.sent.slice(-2)).toEqual(['G92 Z10', 'G92 Z10']);
  });

  it('is held when it never shows what it was told, after a bounded number of times', () => {
    const rig = atTheQuestion();
    rig.driveTo(/^G92 Y170002/);
    for (let times = 0; rig.run.mode === 'moving' && times < 100; times += 1) {
      rig.happens({ type: 'answered', sure: true, replies: [readReply('ok')] });
    }
    expect(rig.sent.filter((line) => line === 'G92 Y170002 E0').length).toBeLessThan(20);
    expect(rig.said('piece-cut')).toHaveLength(1);
    rig.driveTo(null);
    expect(rig.run.hold).toBe('position-wrong');
    // It stood with the whole piece fed and the jaws shut: that one is registered by the answer, and counted.
    expect(rig.said('piece-cut')).toHaveLength(2);
    expect(rig.said('misfeed')).toEqual([]);
  });
});

describe('a run without numbers and checksums', () => {
  const profile = { ...bareProfile, serial: { ...bareProfile.serial, unnumbered: true } };

  it.each(['marlin', 'repetier'] as const)('cuts and counts every piece once: %s', async (family) => {
    const at = await inSecondPiece({ profile, rig: { firmware: { family } } });
    const written: string[] = [];
    at.onLine = (line) => written.push(line);
    await at.stands();
    expect(at.summary()).toMatch(/^ended/);
    expect(written.filter((line) => /^N\d/.test(line))).toEqual([]);
    everyPieceOnce(at);
  });

  it('is held by a lost ok, asks the rig by M114 where it stands, and says no line twice', async () => {
    for (const lost of [/^G1 E/, /^G1 Z5\.5/, /^M400/, /^M114/, /^G92 Y17/, /^G1 Z8/]) {
      const at = await inSecondPiece({ profile });
      const written: string[] = [];
      at.onLine = (line) => {
        written.push(line);
        if (!lost.test(line) || written.filter((other) => lost.test(other)).length > 1) return;
        at.control({ do: 'ok', fault: 'swallow', count: 1 });
      };
      await at.stands();
      expect([at.driven.run.hold, at.failures]).toEqual(['link-lost', ['silent']]);
      expect(lost.test(written.at(-1) ?? '')).toBe(true);
      await at.meet();
      await at.until(() => at.driven.state.outstanding === null);
      expect(written.slice(written.findIndex((line) => line === 'M115'))).toContain('M114');
      expect(written.filter((line) => line.startsWith('G1 Z5.5')).length).toBeLessThanOrEqual(1);
      await at.finish();
      everyPieceOnce(at);
      expect(at.settled).toEqual([]);
    }
  });
});
