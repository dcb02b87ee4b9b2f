import type { TallyLine } from '@/agent/virtual/tally';
import type { EventBody } from '@/lib/protocol/events';
import { closingsOf, gaveAPiece, type Closing, type Order } from './truth';

/** A span of wall time, ms since 1970. */
export interface Span {
  fromMs: number;
  untilMs: number;
}

/** What the server has of one run when all is over. */
export interface RunRecord extends Order {
  runId: string;
  cut: number;
  events: readonly { atMs: number; body: EventBody }[];
}

/** Everything of one rig during one schedule. */
export interface Evidence {
  runs: readonly RunRecord[];
  tally: readonly TallyLine[];
  /** When lines that move something reached the rig. */
  movesAtMs: readonly number[];
  /** From a person's start or going on to the cleared tray. */
  permits: readonly Span[];
  /** From the standstill that was told to the end that a person asked for. */
  workHolds: readonly Span[];
  /** How long the rig may move on after its guard was opened, wall time. */
  guardDelayMs: number;
  /** Wire was taken away, so that jaws shut on nothing. */
  wireTaken: boolean;
  faults: number;
}

export interface Verdict {
  lost: number;
  doubled: number;
  untold: number;
  moves: number;
  /** `run-held` events by reason. */
  holds: Record<string, number>;
  problems: string[];
}

/** Holds that one fault may bring about; more would keep a person running. */
const HOLDS_PER_FAULT = 3;
const HOLDS_ANYWAY = 3;
/** Line, reading and clock lie between the rig and a time that somebody else noted. */
const CLOCK_SLACK_MS = 150;

type Told = RunRecord['events'];

const FORGETS: readonly TallyLine['kind'][] = ['reset', 'killed'];

function toldOf(events: Told, piece: number) {
  const of = (kind: EventBody['kind']) =>
    events.filter(({ body }) => body.kind === kind && 'piece' in body && body.piece === piece);
  const discarded = of('piece-settled').filter(
    ({ body }) => body.kind === 'piece-settled' && body.answer === 'discard',
  );
  return { counted: of('piece-cut'), doubted: of('piece-doubted'), discarded, misfed: of('misfeed') };
}

/** Law 1 and 3 for one piece of a run. */
function judgePiece(
  run: RunRecord,
  piece: number,
  closings: readonly Closing[],
  { tally, wireTaken }: Evidence,
  verdict: Verdict,
): void {
  const told = toldOf(run.events, piece);
  const isCounted = piece <= run.cut;
  const whole = closings.filter((closing) => gaveAPiece(closing, run));
  const name = `tag ${run.tag} piece ${piece}`;
  if (isCounted && closings.length === 0) {
    verdict.doubled += 1;
    verdict.problems.push(`${name} is counted and was never cut`);
  } else if (isCounted && whole.length === 0 && !wireTaken) {
    verdict.doubled += 1;
    const found = closings.map(({ wireMm, severed }) => `${wireMm.toFixed(3)} mm${severed ? '' : ' uncut'}`);
    verdict.problems.push(`${name} is counted, the jaws gave ${found.join(', ')}`);
  }
  const left = whole.length - (isCounted ? 1 : 0) - told.discarded.length - told.misfed.length;
  if (left > 0) {
    verdict.lost += left;
    verdict.problems.push(`${name} was cut ${whole.length} times, ${left} of them nobody was told of`);
  }
  judgeDoubts(name, tally, closings, told, verdict);
}

/** A cut that the rig has forgotten before anybody had its count is a doubt; nothing else is. */
function judgeDoubts(
  name: string,
  tally: readonly TallyLine[],
  closings: readonly Closing[],
  told: ReturnType<typeof toldOf>,
  verdict: Verdict,
): void {
  const forgotten = tally.filter(({ kind }) => FORGETS.includes(kind)).map(({ atMs }) => atMs);
  for (const [index, { atMs }] of closings.entries()) {
    const untilMs = closings[index + 1]?.atMs ?? Infinity;
    const lostAtMs = forgotten.find((at) => at > atMs && at < untilMs);
    if (lostAtMs === undefined || told.doubted.length > 0) continue;
    const known = [...told.counted, ...told.misfed].some((event) => event.atMs < untilMs);
    if (known) continue;
    verdict.untold += 1;
    verdict.problems.push(`${name}: the rig forgot the cut, and no doubt was told`);
  }
  for (const doubt of told.doubted) {
    if (forgotten.some((at) => at < doubt.atMs + CLOCK_SLACK_MS)) continue;
    verdict.untold += 1;
    verdict.problems.push(`${name} is doubted though the rig has forgotten nothing`);
  }
}

function within(spans: readonly Span[], atMs: number): boolean {
  return spans.some(({ fromMs, untilMs }) => atMs >= fromMs && atMs <= untilMs);
}

/** Law 5 and 9: no motion that nobody permitted, on a work hold, long after the guard was opened, or beyond limits. */
function judgeMoves(evidence: Evidence, verdict: Verdict): void {
  const { movesAtMs, permits, workHolds, tally, guardDelayMs } = evidence;
  const complain = (what: string) => {
    verdict.moves += 1;
    verdict.problems.push(what);
  };
  for (const atMs of movesAtMs) {
    if (!within(permits, atMs)) complain('a line that moves was sent and nobody had permitted it');
    else if (within(workHolds, atMs)) complain('a line that moves was sent on a work hold');
  }
  let openedAtMs: number | null = null;
  for (const line of tally) {
    if (line.kind === 'guard') openedAtMs = line.open ? line.atMs : null;
    if (line.kind === 'limit-exceeded')
      complain(`${line.axis} was sent to ${line.wantedMm} mm, beyond its limits`);
    if (line.kind === 'motion-guard-open' && openedAtMs !== null && line.atMs > openedAtMs + guardDelayMs) {
      complain(
        `${line.axes.join('')} began to move ${Math.round(line.atMs - openedAtMs)} ms after the guard opened`,
      );
    }
  }
}

/** Judges one rig's part in one schedule by the virtual rig's own tally. */
export function judge(evidence: Evidence): Verdict {
  const verdict: Verdict = { lost: 0, doubled: 0, untold: 0, moves: 0, holds: {}, problems: [] };
  for (const run of evidence.runs) {
    const pieces = closingsOf(evidence.tally, run);
    const last = Math.max(run.cut, ...pieces.keys());
    for (let piece = 1; piece <= last; piece += 1) {
      judgePiece(run, piece, pieces.get(piece) ?? [], evidence, verdict);
    }
    for (const { body } of run.events) {
      if (body.kind !== 'run-held' || body.reason === 'first-pieces') continue;
      verdict.holds[body.reason] = (verdict.holds[body.reason] ?? 0) + 1;
    }
  }
  judgeMoves(evidence, verdict);
  const holds = Object.values(verdict.holds).reduce((sum, count) => sum + count, 0);
  if (holds > HOLDS_ANYWAY + HOLDS_PER_FAULT * evidence.faults) {
    verdict.problems.push(`${holds} holds for ${evidence.faults} faults`);
  }
  return verdict;
}
