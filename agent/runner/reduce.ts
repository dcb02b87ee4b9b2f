import type { Reply } from '@/agent/dialect/reply';
import type { LinkFailure } from '@/agent/link/exchange';
import type { Profile } from '@/lib/program/profile';
import type { ReadProgram } from '@/lib/program/steps';
import type { RunProgram } from '@/lib/protocol/pairing';
import type { Firmware } from '@/lib/protocol/report';
import { onAnswered } from './answers';
import { adoptFence, onCommand, stopRun, type CommandEvent } from './commands';
import { answerWorkHold, doubtOrHold, enterHold, finishRun, requireHome } from './holding';
import { motionBoundMs } from './measures';
import { nextLine } from './next-line';
import { PROGRAM_BEGIN, unreadSignals, type RigState, type Run } from './state';
import { Turn, type Effect } from './turn';

/** A program as it came: read and checked, or why not. */
export type FetchedProgram =
  | { outcome: 'read'; run: RunProgram; program: ReadProgram }
  | { outcome: 'refused'; problems: string[] }
  | { outcome: 'unreachable' };

/** What happens to a rig. `nowMs` is the agent's wall clock, epoch ms. */
export type RigEvent = { nowMs: number } & (
  | ({ type: 'command' } & CommandEvent)
  | { type: 'local-stop' }
  | { type: 'fetched'; commandId: string; runId: string; fetched: FetchedProgram }
  | { type: 'opening' }
  | { type: 'met'; firmware: Firmware; bannerSeen: boolean; notice?: string | null }
  | { type: 'stranger'; reason: string }
  | { type: 'unreachable'; reason: string }
  | { type: 'lost'; failure: LinkFailure; reason: string }
  | { type: 'heard'; reply: Reply }
  | { type: 'answered'; sure: boolean; replies: readonly Reply[] }
  | { type: 'rebound'; profile: Profile; fence: number }
  | { type: 'restored'; journalDamaged: boolean }
  | { type: 'tick' }
);

export interface Reduced {
  state: RigState;
  effects: readonly Effect[];
}

/** Lines of the firmware that go into the rig's log in a minute; a board gone mad fills no disk. */
const SAID_PER_MINUTE_MAX = 30;
const MINUTE_MS = 60_000;

/** The agent's rules as a pure function: what a rig's state becomes and what is to be done, in order. */
export function reduce(state: RigState, event: RigEvent): Reduced {
  const turn = new Turn(state, event.nowMs);
  apply(turn, event);
  sendNext(turn);
  return { state: turn.state, effects: turn.effects };
}

function apply(turn: Turn, event: RigEvent): void {
  switch (event.type) {
    case 'command':
      return onCommand(turn, event);
    case 'local-stop':
      return stopRun(turn, null);
    case 'fetched':
      return onFetched(turn, event.commandId, event.runId, event.fetched);
    case 'opening':
      return turn.set({ port: 'opening' });
    case 'met':
      return onMet(turn, event.firmware, event.bannerSeen, event.notice ?? null);
    case 'stranger':
      return turn.set({ port: 'refused', portProblem: event.reason.slice(0, 200) });
    case 'unreachable':
      return turn.set({ port: 'closed', portProblem: event.reason.slice(0, 200) });
    case 'lost':
      return onLost(turn, event.failure, event.reason);
    case 'heard':
      return onHeard(turn, event.reply);
    case 'answered': {
      const purpose = turn.state.outstanding;
      if (!purpose) return undefined;
      turn.set({ outstanding: null });
      return onAnswered(turn, purpose, event);
    }
    case 'rebound':
      return onRebound(turn, event.profile, event.fence);
    case 'restored':
      return onRestored(turn, event.journalDamaged);
    case 'tick':
      return onTick(turn);
  }
}

function sendNext(turn: Turn): void {
  const next = nextLine(turn.state, turn.nowMs);
  if (!next) return;
  const { run, rigId } = turn.state;
  const { purpose } = next;
  // On disk before the jaws may close: this piece is open from here on (law 3).
  if (run && purpose.for === 'step' && purpose.step.kind === 'cut' && purpose.cursor.part === 'piece') {
    const { piece } = purpose.cursor;
    if (run.openCut !== piece) {
      turn.note({ note: 'cut-commanded', rigId, runId: run.order.runId, piece });
      turn.setRun({ openCut: piece });
    }
  }
  turn.set({ outstanding: purpose });
  turn.effects.push({ do: 'send', command: next.command, expectedMs: next.expectedMs, needs: next.needs });
}

function onFetched(turn: Turn, commandId: string, runId: string, fetched: FetchedProgram): void {
  const { rigId, fetching, run } = turn.state;
  turn.set({ fetching: fetching.filter((id) => id !== commandId) });
  if (fetched.outcome === 'unreachable') return turn.refuse(commandId, 'service-away');
  if (fetched.outcome === 'refused') {
    turn.event({ kind: 'program-refused', rigId, runId, problems: fetched.problems.slice(0, 20) });
    return turn.refuse(commandId, 'program-refused');
  }
  if (run) return turn.refuse(commandId, 'rig-busy');
  adoptFence(turn, fetched.run.fence);
  turn.set({ profile: fetched.run.profile, run: heldRun(fetched.run, fetched.program) });
  turn.event({ kind: 'program-held', rigId, runId, programSha256: fetched.run.programSha256 });
  turn.done(commandId);
}

/** A run whose program is held and which has not begun. */
export function heldRun(given: RunProgram, program: ReadProgram): Run {
  const { program: _text, profile: _profile, ...order } = given;
  return {
    order,
    program,
    mode: 'holding',
    cursor: PROGRAM_BEGIN,
    cut: 0,
    openCut: null,
    doubt: null,
    registered: false,
    standbyCount: null,
    mustHome: false,
    measureAgain: false,
    measureAt: null,
    pause: null,
    stop: null,
    after: null,
    hold: null,
    unknown: false,
    refusal: null,
    saidAgain: 0,
    jawsClosedMs: null,
    stillSinceMs: null,
  };
}

/** `notice`: what is odd about the opening, though the rig is met. */
function onMet(turn: Turn, firmware: Firmware, bannerSeen: boolean, notice: string | null): void {
  const { rigId, profile, displayShown, workHold } = turn.state;
  turn.set({
    port: 'open',
    portProblem: notice?.slice(0, 200) ?? null,
    halted: false,
    firmware,
    signals: unreadSignals(profile),
    polledMs: { switches: 0, heaters: 0 },
    outstanding: null,
    displayShown: displayShown === null ? null : '',
    presence: null,
  });
  turn.event({ kind: 'rig-connected', rigId, firmwareName: firmware.name });
  const { run } = turn.state;
  const begun = run && run.mode !== 'holding' && run.mode !== 'ended';
  if (begun && bannerSeen && run.doubt === null) doubtOrHold(turn, 'firmware-reset');
  else if (begun) turn.set({ settle: 'await' });
  if (workHold && workHold.answerTo.length > 0) turn.set({ settle: 'await' });
}

const HELD_BECAUSE = {
  closed: 'link-lost',
  silent: 'link-lost',
  'out-of-step': 'link-lost',
  reset: 'firmware-reset',
  halted: 'firmware-halted',
} as const;

function onLost(turn: Turn, failure: LinkFailure, reason: string): void {
  const { rigId, port, profile, showing, halted } = turn.state;
  for (const commandId of showing) turn.refuse(commandId, 'rig-not-connected');
  const wasOpen = port === 'open';
  const dead = failure === 'halted' || (halted && failure !== 'closed' && failure !== 'reset');
  turn.set({
    port: dead ? 'open' : 'closed',
    halted: dead,
    portProblem: reason.slice(0, 200),
    portClosedMs: wasOpen ? turn.nowMs : turn.state.portClosedMs,
    signals: unreadSignals(profile),
    outstanding: null,
    settle: null,
    showing: [],
    presence: null,
    displayShown: null,
  });
  if (wasOpen && !halted) turn.event({ kind: 'rig-lost', rigId, reason: reason.slice(0, 200) });
  const because = HELD_BECAUSE[failure];
  const { run } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  if (because !== 'link-lost') return doubtOrHold(turn, because, reason);
  requireHome(turn, true);
  turn.setRun({ unknown: true, pause: null });
  if (run.stop && run.openCut === null) return finishRun(turn, 'stopped');
  if (run.after?.to === 'held') return enterHold(turn, run.after.reason, run.after.note);
  enterHold(turn, 'link-lost', reason);
}

const LOGGED: readonly Reply['kind'][] = ['other', 'refusal', 'error', 'halted', 'action', 'switch-hit'];

function onHeard(turn: Turn, reply: Reply): void {
  if (LOGGED.includes(reply.kind)) say(turn, reply.text);
  const { run, outstanding } = turn.state;
  if (reply.kind === 'action') return onAction(turn, reply.action);
  if (reply.kind !== 'refusal' || !run) return;
  // A display or a switch that the build does not know says nothing against the piece.
  const ofProgram = outstanding === null || outstanding.for === 'step' || outstanding.for === 'settle';
  if (ofProgram && (run.mode === 'moving' || run.mode === 'settling')) turn.setRun({ refusal: reply.text });
}

function onAction(turn: Turn, action: string): void {
  const { run, signals, profile } = turn.state;
  if (/^(filament_runout|out_of_filament)/.test(action) && profile.fitted.wireSwitch) {
    turn.set({ signals: { ...signals, wire: { reading: 'missing', readAt: turn.at } } });
    return;
  }
  if (/^(pause|paused)\b/.test(action) && run?.mode === 'moving') turn.setRun({ pause: { personId: null } });
}

function say(turn: Turn, text: string): void {
  const { said, rigId } = turn.state;
  const fresh = turn.nowMs - said.sinceMs >= MINUTE_MS;
  const count = fresh ? 1 : said.count + 1;
  turn.set({ said: { sinceMs: fresh ? turn.nowMs : said.sinceMs, count } });
  if (count <= SAID_PER_MINUTE_MAX) turn.event({ kind: 'firmware-said', rigId, text: text.slice(0, 300) });
}

/** A new profile waits while a run goes by its own. */
function onRebound(turn: Turn, profile: Profile, fence: number): void {
  adoptFence(turn, fence);
  if (turn.state.run || JSON.stringify(profile) === JSON.stringify(turn.state.profile)) return;
  turn.set({ profile, signals: unreadSignals(profile), polledMs: { switches: 0, heaters: 0 } });
}

/** The agent comes back from wherever its last life ended; the rig is asked before anybody is. */
function onRestored(turn: Turn, journalDamaged: boolean): void {
  const { run } = turn.state;
  if (!run || run.mode === 'holding' || run.mode === 'ended') return;
  if (journalDamaged) return enterHold(turn, 'journal-damaged');
  enterHold(turn, run.doubt === null ? 'agent-restarted' : 'doubt');
}

function onTick(turn: Turn): void {
  const { port, workHold, portClosedMs, run } = turn.state;
  if (!workHold || workHold.answerTo.length === 0 || port === 'open') return;
  // Nothing was sent since: what was queued has ended by now, whether or not anybody can ask.
  if (turn.nowMs - portClosedMs >= motionBoundMs(run)) answerWorkHold(turn);
}
