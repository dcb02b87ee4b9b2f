import { describe, expect, it } from 'vitest';
import type { TallyLine } from '@/agent/virtual/tally';
import type { EventBody } from '@/lib/protocol/events';
import { judge, type Evidence } from '@/scripts/faults/judge';
import { wholePieces } from '@/scripts/faults/truth';

const RIG = '00000000-0000-4000-8000-000000000001';
const RUN = '00000000-0000-4000-8000-000000000002';
const ORDER = { tag: 7, lengthMm: 60, feedPerMm: 1 };
const of = { rigId: RIG, runId: RUN };
const mark = (atMs: number) => ({ rig: 'Rig', atMs, mechanicalMs: atMs * 12 });

function closing(piece: number, atMs: number, over: { wireMm?: number; severed?: boolean } = {}): TallyLine {
  return {
    ...mark(atMs),
    kind: 'closing',
    wireMm: 60,
    severed: true,
    guardOpen: false,
    register: 70_000 + piece - 1,
    feedMm: 60,
    bladeCuts: 1,
    spoolMm: 1000,
    motionMs: atMs,
    ...over,
  };
}

const trim: TallyLine = { ...closing(1, 50, { wireMm: 12 }), kind: 'closing', feedMm: 12 } as TallyLine;
const reset = (atMs: number): TallyLine => ({ ...mark(atMs), kind: 'reset', cause: 'power' });

function cut(piece: number, atMs: number): { atMs: number; body: EventBody } {
  const jawsClosedAt = new Date(atMs).toISOString();
  return { atMs, body: { kind: 'piece-cut', ...of, piece, wireMm: 60, jawsClosedAt } };
}

function doubt(piece: number, atMs: number): { atMs: number; body: EventBody } {
  return { atMs, body: { kind: 'piece-doubted', ...of, piece, wireMm: 60 } };
}

function settle(piece: number, atMs: number, answer: 'count' | 'discard'): { atMs: number; body: EventBody } {
  return { atMs, body: { kind: 'piece-settled', ...of, piece, answer, personId: RIG } };
}

function evidence(
  tally: TallyLine[],
  events: { atMs: number; body: EventBody }[],
  over: Partial<Evidence> & { cut?: number } = {},
): Evidence {
  const { cut: counted = 2, ...rest } = over;
  return {
    runs: [{ ...ORDER, runId: RUN, cut: counted, events }],
    tally,
    movesAtMs: [],
    permits: [{ fromMs: 0, untilMs: 10_000 }],
    workHolds: [],
    guardDelayMs: 500,
    wireTaken: false,
    faults: 1,
    ...rest,
  };
}

const two = [trim, closing(1, 100), closing(2, 200)];
const twoCut = [cut(1, 110), cut(2, 210)];

describe('the judge of a schedule', () => {
  it('finds nothing when each counted piece was cut once', () => {
    expect(judge(evidence(two, twoCut))).toMatchObject({
      lost: 0,
      doubled: 0,
      untold: 0,
      moves: 0,
      problems: [],
    });
  });

  it('calls a piece that is counted and was never cut doubled', () => {
    expect(judge(evidence([trim, closing(1, 100)], twoCut))).toMatchObject({ doubled: 1, lost: 0 });
  });

  it('calls a counted piece that is short or still hangs doubled, unless the wire was taken away', () => {
    for (const bad of [{ wireMm: 59.94 }, { severed: false }]) {
      const tally = [trim, closing(1, 100), closing(2, 200, bad)];
      expect(judge(evidence(tally, twoCut)).doubled).toBe(1);
      expect(judge(evidence(tally, twoCut, { wireTaken: true })).doubled).toBe(0);
    }
    expect(judge(evidence([trim, closing(1, 100), closing(2, 200, { wireMm: 60.05 })], twoCut)).doubled).toBe(
      0,
    );
  });

  it('calls a piece that was cut twice and told once lost, unless the first was discarded by somebody', () => {
    const tally = [...two, closing(2, 300)];
    expect(judge(evidence(tally, twoCut)).lost).toBe(1);
    const told = [cut(1, 110), doubt(2, 260), settle(2, 270, 'discard'), cut(2, 310)];
    const forgotten = [trim, closing(1, 100), closing(2, 200), reset(250), closing(2, 300)];
    expect(judge(evidence(forgotten, told))).toMatchObject({ lost: 0, untold: 0, problems: [] });
  });

  it('calls a cut that nobody counts lost', () => {
    expect(judge(evidence(two, [cut(1, 110)], { cut: 1 })).lost).toBe(1);
  });

  it('wants a doubt where the rig forgot a cut that was not counted, and only there', () => {
    const forgotten = [...two.slice(0, 2), closing(2, 200), reset(250)];
    const counted = [cut(1, 110), settle(2, 270, 'count')];
    expect(judge(evidence(forgotten, counted)).untold).toBe(1);
    expect(judge(evidence(forgotten, [...counted, doubt(2, 260)])).untold).toBe(0);
    expect(judge(evidence(two, [...twoCut, doubt(2, 260)])).untold).toBe(1);
  });

  it('counts motion that nobody permitted, on a work hold, after the guard’s delay and beyond limits', () => {
    const permits = [{ fromMs: 100, untilMs: 200 }];
    expect(judge(evidence(two, twoCut, { permits, movesAtMs: [99, 100, 200, 201] })).moves).toBe(2);
    const workHolds = [{ fromMs: 150, untilMs: 160 }];
    expect(judge(evidence(two, twoCut, { workHolds, movesAtMs: [149, 150, 160, 161] })).moves).toBe(2);
    const guard = (atMs: number): TallyLine => ({ ...mark(atMs), kind: 'guard', open: true });
    const motion = (atMs: number): TallyLine => ({
      ...mark(atMs),
      kind: 'motion-guard-open',
      axes: ['E'],
      homing: false,
    });
    expect(judge(evidence([...two, guard(300), motion(800), motion(801)], twoCut)).moves).toBe(1);
    const beyond: TallyLine = { ...mark(300), kind: 'limit-exceeded', axis: 'Z', wantedMm: -9, atMm: -8 };
    expect(judge(evidence([...two, beyond], twoCut)).moves).toBe(1);
  });

  it('finds more holds than the faults can have brought about', () => {
    const held = (atMs: number): { atMs: number; body: EventBody } => ({
      atMs,
      body: { kind: 'run-held', ...of, reason: 'link-lost', note: '' },
    });
    const six = Array.from({ length: 6 }, (_, index) => held(300 + index));
    expect(judge(evidence(two, [...twoCut, ...six])).problems).toEqual([]);
    expect(judge(evidence(two, [...twoCut, ...six, held(400)])).problems).toHaveLength(1);
    expect(judge(evidence(two, [...twoCut, ...six])).holds).toEqual({ 'link-lost': 6 });
  });

  it('counts whole pieces as somebody does who measures what lies in the tray', () => {
    expect(wholePieces([...two, closing(3, 300, { severed: false })], ORDER, 3)).toBe(2);
  });
});
