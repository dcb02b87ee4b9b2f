import type { Axis } from './mechanics/axes';

/** What happened to the rig in truth, whatever its firmware believes. */
export type TallyEvent =
  | {
      kind: 'closing';
      /** Wire under the jaws since the last severed end. */
      wireMm: number;
      severed: boolean;
      guardOpen: boolean;
      /** Register axis and feed, as the firmware had them for the move that closed the jaws. */
      register: number;
      feedMm: number;
      bladeCuts: number;
      spoolMm: number;
      /** Sum of the motion times of all moves so far, mechanical: differences give a piece's ideal time. */
      motionMs: number;
    }
  | { kind: 'motion-guard-open'; axes: Axis[]; homing: boolean }
  | { kind: 'limit-exceeded'; axis: Axis; wantedMm: number; atMm: number }
  | { kind: 'homed'; axes: Axis[] }
  | { kind: 'reset'; cause: 'power' | 'port-opened' | 'button' }
  | { kind: 'killed' }
  | { kind: 'steppers-off'; cause: 'timeout' | 'command' | 'killed' | 'reset' }
  | { kind: 'logic-power'; on: boolean }
  | { kind: 'motor-power'; on: boolean; cause: 'guard' | 'supply' }
  | { kind: 'guard'; open: boolean }
  | { kind: 'wire'; present: boolean; spoolMm: number }
  | { kind: 'hand-moved'; axis: Axis; byMm: number; atMm: number }
  | { kind: 'port'; open: boolean };

/** One line of the tally file. `atMs` is wall time since 1970, `mechanicalMs` the rig's own since its start. */
export type TallyLine = TallyEvent & { rig: string; atMs: number; mechanicalMs: number };

/** Takes an event that happened at `atMs` of mechanical time. */
export type TallySink = (event: TallyEvent, atMs: number) => void;
