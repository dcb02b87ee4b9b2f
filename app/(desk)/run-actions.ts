'use server';

import { action } from '@/lib/http/action';
import { acknowledgeAlarm as acknowledgeAlarmService } from '@/lib/services/alarms/acknowledge-alarm';
import { acknowledgeNotes as acknowledgeNotesService } from '@/lib/services/runs/acknowledge-notes';
import { beginWorkHold as beginWorkHoldService } from '@/lib/services/runs/begin-work-hold';
import { clearTray as clearTrayService } from '@/lib/services/runs/clear-tray';
import { confirmBag as confirmBagService } from '@/lib/services/runs/confirm-bag';
import { dropRun as dropRunService } from '@/lib/services/runs/drop-run';
import { endWorkHold as endWorkHoldService } from '@/lib/services/runs/end-work-hold';
import { goOn as goOnService } from '@/lib/services/runs/go-on';
import { holdRun } from '@/lib/services/runs/hold-run';
import { measurePieces as measurePiecesService } from '@/lib/services/runs/measure-pieces';
import { releaseLot as releaseLotService } from '@/lib/services/runs/release-lot';
import { scrapPieces as scrapPiecesService } from '@/lib/services/runs/scrap-pieces';
import { settlePiece as settlePieceService } from '@/lib/services/runs/settle-piece';
import { showCode as showCodeService } from '@/lib/services/runs/show-code';
import { startRun } from '@/lib/services/runs/start-run';
import type { ActionResult } from '@/lib/schemas/action-result';
import { type CommandOutcome, commandOutcomeSchema } from '@/lib/schemas/run';
import type { PersonActor, ServiceContext } from '@/lib/services/context';

type Service = (call: { ctx: ServiceContext; input: unknown }) => Promise<unknown>;

/** Some verbs ask the rig and answer its outcome; the others change only what is stored here. */
function run(service: Service, input: unknown): Promise<ActionResult<CommandOutcome | null>> {
  return action(async (ctx: ServiceContext<PersonActor>) => {
    const outcome = commandOutcomeSchema.safeParse(await service({ ctx, input }));
    return outcome.success ? outcome.data : null;
  });
}

export async function acknowledgeNotes(input: unknown) {
  return run(acknowledgeNotesService, input);
}
export async function showCode(input: unknown) {
  return run(showCodeService, input);
}
export async function start(input: unknown) {
  return run(startRun, input);
}
export async function goOn(input: unknown) {
  return run(goOnService, input);
}
export async function hold(input: unknown) {
  return run(holdRun, input);
}
export async function settlePiece(input: unknown) {
  return run(settlePieceService, input);
}
export async function measurePieces(input: unknown) {
  return run(measurePiecesService, input);
}
export async function scrapPieces(input: unknown) {
  return run(scrapPiecesService, input);
}
export async function clearTray(input: unknown) {
  return run(clearTrayService, input);
}
export async function releaseLot(input: unknown) {
  return run(releaseLotService, input);
}
export async function beginWorkHold(input: unknown) {
  return run(beginWorkHoldService, input);
}
export async function endWorkHold(input: unknown) {
  return run(endWorkHoldService, input);
}
export async function acknowledgeAlarm(input: unknown) {
  return run(acknowledgeAlarmService, input);
}
export async function dropRun(input: unknown) {
  return run(dropRunService, input);
}
export async function confirmBag(input: unknown) {
  return run(confirmBagService, input);
}
