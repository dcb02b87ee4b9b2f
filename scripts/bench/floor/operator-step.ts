import type { RigDto } from '@/lib/schemas/floor';

/** What an operator does next at a rig. */
export type OperatorStep = 'start' | 'measure' | 'go-on' | 'clear-tray';

type Seen = Pick<RigDto, 'name'> & {
  run: Pick<NonNullable<RigDto['run']>, 'state' | 'programHeld' | 'holdReason' | 'piecesToMeasure'> | null;
};

/**
 * The next step that keeps a rig cutting; null while there is nothing to do.
 * @throws Error when the run is held for anything but its first pieces: what follows would be no measurement
 */
export function operatorStep({ name, run }: Seen): OperatorStep | null {
  switch (run?.state) {
    case 'prepared':
      return run.programHeld ? 'start' : null;
    case 'held':
      if (run.holdReason !== 'first-pieces') throw new Error(`${name} is held: ${run.holdReason}`);
      return run.piecesToMeasure.length > 0 ? 'measure' : 'go-on';
    case 'ended':
      return 'clear-tray';
    default:
      return null;
  }
}
