import type { EventBody } from '@/lib/protocol/events';

/** What an event says beyond its kind, for the rig's log. Firmware's words stay as they came. */
export function logText(body: EventBody): string {
  switch (body.kind) {
    case 'firmware-said':
      return body.text;
    case 'rig-connected':
      return body.firmwareName;
    case 'rig-lost':
      return body.reason;
    case 'program-refused':
      return body.problems.join(' · ');
    case 'run-held':
      return body.note === '' ? body.reason : `${body.reason}: ${body.note}`;
    case 'run-ended':
      return `${body.outcome}, ${body.pieces} pieces`;
    case 'misfeed':
      return `piece ${body.piece}: ${body.cause}, seen by ${body.foundBy === 'rig' ? 'the rig' : 'a person'}`;
    case 'piece-cut':
    case 'piece-doubted':
      return `piece ${body.piece}, ${body.wireMm} mm`;
    case 'piece-settled':
      return `piece ${body.piece}: ${body.answer === 'count' ? 'counted' : 'discarded'}`;
    case 'trim-cut':
      return `${body.wireMm} mm`;
    case 'agent-started':
      return body.software;
    case 'program-held':
    case 'program-dropped':
    case 'run-started':
    case 'run-paused':
    case 'run-went-on':
    case 'work-hold-began':
    case 'work-hold-ended':
    case 'guard-opened':
    case 'guard-closed':
      return '';
  }
}
