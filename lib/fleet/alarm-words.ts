import type { AlarmDto, RigDto } from '@/lib/schemas/floor';
import { HOLD_REASONS, type HoldReason } from './run';
import { HOLD_WORDS } from './words';

/** What an alarm says: what happened, and what to do or bring. */
export interface AlarmWords {
  happened: string;
  bring: string;
}

function holdReasonOf(alarm: AlarmDto): HoldReason | null {
  return HOLD_REASONS.find((reason) => reason === alarm.details.reason) ?? null;
}

function atPiece(rig: RigDto): string {
  return rig.run ? ` at piece ${Math.min(rig.run.cut + 1, rig.run.pieces)}` : '';
}

function firstPieces(rig: RigDto): string {
  const run = rig.run;
  if (!run || run.piecesToMeasure.length === 0) return HOLD_WORDS['first-pieces'].happened;
  const rest = run.pieces - run.cut;
  return `${run.piecesToMeasure.length} pieces cut, measure them before the other ${rest}`;
}

/** An alarm in words, for the person who will walk there. */
export function alarmWords(alarm: AlarmDto, rig: RigDto): AlarmWords {
  switch (alarm.kind) {
    case 'rig silent':
      return { happened: 'not heard; it may still be moving', bring: 'go and look' };
    case 'guard opened in a run':
      return { happened: `the guard was opened${atPiece(rig)}`, bring: HOLD_WORDS['guard-open'].bring };
    case 'heater warm in a run':
      return { happened: HOLD_WORDS['heater-warm'].happened, bring: HOLD_WORDS['heater-warm'].bring };
    case 'surplus pieces':
      return {
        happened: 'it cut pieces for a lot that was taken away',
        bring: 'find them and keep them out of the bag',
      };
    case 'journal conflict':
      return {
        happened: 'its agent told the same event twice, differently',
        bring: 'count the tray; tell the owner',
      };
    case 'program refused':
      return {
        happened: `its program was refused: ${alarm.details.problem ?? 'no reason given'}`,
        bring: 'look at the profile',
      };
    case 'first pieces to measure':
      return { happened: firstPieces(rig), bring: HOLD_WORDS['first-pieces'].bring };
    case 'piece in doubt':
      return {
        happened: `piece ${alarm.details.piece ?? ''} is in doubt`.replace('  ', ' '),
        bring: HOLD_WORDS.doubt.bring,
      };
    case 'tray to clear':
      return { happened: `run over, ${rig.run?.bagged ?? 0} pieces in the tray`, bring: 'a bag and a label' };
    case 'run held': {
      const reason = holdReasonOf(alarm);
      const words = reason ? HOLD_WORDS[reason] : { happened: 'the run is held', bring: 'go and look' };
      return { happened: `${words.happened}${atPiece(rig)}`, bring: words.bring };
    }
  }
}
