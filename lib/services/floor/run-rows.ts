import { and, desc, eq, type SQL, sql } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { people } from '@/db/schema/people';
import { profiles, rigs } from '@/db/schema/rigs';
import { bags, pieceEntries, runs } from '@/db/schema/runs';
import { wires } from '@/db/schema/stock';
import { baggedOf } from '@/lib/fleet/counts';
import { piecesToMeasure } from '@/lib/fleet/first-pieces';
import { wireNeededMm } from '@/lib/program/wire-needed';
import type { RunDto } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { runColumns, type RunRow } from '../runs/run-columns';
import { wireDto } from '../wires/wire-dto';

const sumOf = (kind: 'scrap' | 'sample' | 'doubt') => sql<number>`coalesce((
  select sum(e.pieces) from ${pieceEntries} e where e.run_id = ${runs.id} and e.kind = ${kind}), 0)::int`;

function select(ctx: ServiceContext) {
  return ctx.db
    .select({
      run: runColumns,
      lotNumber: lots.number,
      line: batchLines,
      batch: { id: batches.id, name: batches.name, dueAt: batches.dueAt },
      wire: wires,
      rigName: rigs.name,
      profile: profiles.profile,
      startedByName: people.name,
      bagCode: bags.code,
      scrapped: sumOf('scrap'),
      sampled: sumOf('sample'),
      doubted: sumOf('doubt'),
    })
    .from(runs)
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .innerJoin(wires, eq(wires.id, runs.wireId))
    .innerJoin(rigs, eq(rigs.id, runs.rigId))
    .innerJoin(profiles, eq(profiles.id, runs.profileId))
    .leftJoin(people, eq(people.id, runs.startedBy))
    .leftJoin(bags, eq(bags.runId, runs.id));
}

type Row = Awaited<ReturnType<typeof select>>[number];

const iso = (moment: Date | null) => moment?.toISOString() ?? null;

/** When a run that is cutting will have cut its last piece, at the program's own pace; null while it stands. */
function expectedEnd(run: RunRow): string | null {
  const lastAt = run.lastPieceAt ?? run.startedAt;
  if (run.state !== 'cutting' || !lastAt) return null;
  const leftS = ((run.pieces - run.cut) * run.expectedS) / run.pieces;
  return new Date(lastAt.getTime() + leftS * 1000).toISOString();
}

function runDto(row: Row): RunDto {
  const { run, line, batch } = row;
  const heldForThem = run.state === 'held' && run.holdReason === 'first-pieces';
  return {
    id: run.id,
    rigId: run.rigId,
    rigName: row.rigName,
    lotId: run.lotId,
    lotNumber: row.lotNumber,
    batchId: batch.id,
    batchName: batch.name,
    batchDueAt: iso(batch.dueAt),
    lineLabel: line.label,
    wire: wireDto(row.wire),
    lengthMm: run.lengthMm,
    toleranceMinusMm: line.toleranceMinusMm,
    tolerancePlusMm: line.tolerancePlusMm,
    pieces: run.pieces,
    cut: run.cut,
    scrapped: row.scrapped,
    sampled: row.sampled,
    doubted: row.doubted,
    bagged: baggedOf(run.cut, row),
    surplus: run.surplus,
    state: run.state,
    stateSince: run.stateSince.toISOString(),
    holdReason: run.holdReason,
    holdNote: run.holdNote,
    doubtPiece: run.doubtPiece,
    firstPieces: run.firstPieces,
    piecesToMeasure: piecesToMeasure({ ...run, heldForThem }),
    programHeld: run.programHeldAt !== null,
    expectedS: run.expectedS,
    expectedEndAt: expectedEnd(run),
    wireNeededMm: wireNeededMm(row.profile, { pieces: run.pieces - run.cut, lengthMm: run.lengthMm }),
    startedByName: row.startedByName,
    startedAt: iso(run.startedAt),
    lastPieceAt: iso(run.lastPieceAt),
    endedAt: iso(run.endedAt),
    outcome: run.outcome,
    bagCode: row.bagCode,
  };
}

/** Runs as they are answered, the newest first. */
export async function selectRuns(
  ctx: ServiceContext,
  where: SQL | undefined,
  page: { limit: number; offset: number } = { limit: 1000, offset: 0 },
): Promise<RunDto[]> {
  const rows = await select(ctx)
    .where(and(where))
    .orderBy(desc(runs.preparedAt), desc(runs.id))
    .limit(page.limit)
    .offset(page.offset);
  return rows.map(runDto);
}
