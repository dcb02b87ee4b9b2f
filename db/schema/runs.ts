import { sql } from 'drizzle-orm';
import {
  bigserial,
  boolean,
  check,
  index,
  integer,
  pgTable,
  real,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import type { HoldReason, MisfeedCause, RunState } from '@/lib/fleet/run';
import { lots } from './batches';
import { millimetres, moment } from './columns';
import { people } from './people';
import { interlockNotes, profiles, rigs } from './rigs';
import { blades, spools, wires } from './stock';

/**
 * One execution of a lot on a rig. `cut` is the number the rig's register confirmed; scrapped, sampled and doubted
 * are sums of `piece_entries`; bagged = cut - scrapped - sampled - doubted.
 */
export const runs = pgTable(
  'runs',
  {
    id: uuid().primaryKey().defaultRandom(),
    lotId: uuid()
      .notNull()
      .references(() => lots.id),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    state: text().$type<RunState>().notNull().default('prepared'),
    fence: integer().notNull(),
    tag: integer().notNull(),
    pieces: integer().notNull(),
    lengthMm: millimetres().notNull(),
    wireId: uuid()
      .notNull()
      .references(() => wires.id),
    spoolId: uuid().references(() => spools.id),
    bladeId: uuid().references(() => blades.id),
    profileId: uuid()
      .notNull()
      .references(() => profiles.id),
    firstPieces: integer().notNull(),
    program: text().notNull(),
    programSha256: text().notNull(),
    expectedS: real().notNull(),
    programHeldAt: moment(),
    cut: integer().notNull().default(0),
    trims: integer().notNull().default(0),
    wireUsedMm: millimetres().notNull().default(0),
    holdReason: text().$type<HoldReason>(),
    holdNote: text().notNull().default(''),
    /** First pieces are measured through this piece; the agent holds again when more are due. */
    measuredThrough: integer().notNull().default(0),
    doubtPiece: integer(),
    startedBy: uuid().references(() => people.id),
    preparedAt: moment().notNull(),
    startedAt: moment(),
    lastPieceAt: moment(),
    stateSince: moment().notNull(),
    endedAt: moment(),
    outcome: text().$type<'complete' | 'stopped'>(),
    surplus: integer().notNull().default(0),
  },
  (t) => [
    uniqueIndex('runs_one_active_per_rig')
      .on(t.rigId)
      .where(sql`${t.state} in ('prepared', 'cutting', 'paused', 'held', 'ended')`),
    uniqueIndex('runs_one_active_per_lot')
      .on(t.lotId)
      .where(sql`${t.state} in ('prepared', 'cutting', 'paused', 'held', 'ended')`),
    check('runs_tag', sql`${t.tag} between 1 and 99`),
    check('runs_cut', sql`${t.cut} between 0 and ${t.pieces}`),
    index('runs_state').on(t.state),
    index('runs_lot').on(t.lotId),
  ],
);

/** Each time a person said they read the notes. `full`: the whole text, not only the short list. Appended only. */
export const acknowledgements = pgTable(
  'acknowledgements',
  {
    id: uuid().primaryKey().defaultRandom(),
    runId: uuid()
      .notNull()
      .references(() => runs.id),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    notesId: uuid()
      .notNull()
      .references(() => interlockNotes.id),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    full: boolean().notNull(),
    at: moment().notNull(),
  },
  (t) => [
    index('acknowledgements_person').on(t.personId, t.notesId, t.at),
    index('acknowledgements_run').on(t.runId),
  ],
);

/** Pieces that do not go into the bag. `pieces` may be negative: a correction, with its reason. Appended only. */
export const pieceEntries = pgTable(
  'piece_entries',
  {
    id: bigserial({ mode: 'number' }).primaryKey(),
    runId: uuid()
      .notNull()
      .references(() => runs.id),
    kind: text().$type<'scrap' | 'sample' | 'doubt'>().notNull(),
    pieces: integer().notNull(),
    reason: text().notNull(),
    personId: uuid().references(() => people.id),
    at: moment().notNull(),
  },
  (t) => [
    index('piece_entries_run').on(t.runId),
    check('piece_entries_kind', sql`${t.kind} in ('scrap', 'sample', 'doubt')`),
  ],
);

/** Checks: measured lengths of pieces. Appended only. */
export const measurements = pgTable(
  'measurements',
  {
    id: bigserial({ mode: 'number' }).primaryKey(),
    runId: uuid()
      .notNull()
      .references(() => runs.id),
    piece: integer().notNull(),
    lengthMm: millimetres().notNull(),
    withinTolerance: boolean().notNull(),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    at: moment().notNull(),
  },
  (t) => [index('measurements_run').on(t.runId, t.piece)],
);

/** Appended only. */
export const misfeeds = pgTable(
  'misfeeds',
  {
    id: bigserial({ mode: 'number' }).primaryKey(),
    runId: uuid()
      .notNull()
      .references(() => runs.id),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    piece: integer().notNull(),
    cause: text().$type<MisfeedCause>().notNull(),
    foundBy: text().$type<'rig' | 'person'>().notNull(),
    personId: uuid().references(() => people.id),
    at: moment().notNull(),
  },
  (t) => [index('misfeeds_rig').on(t.rigId, t.at)],
);

/** What left the rig. `code` is what the label's barcode says. Appended only. */
export const bags = pgTable(
  'bags',
  {
    id: uuid().primaryKey().defaultRandom(),
    runId: uuid()
      .notNull()
      .unique()
      .references(() => runs.id),
    code: text().notNull().unique(),
    pieces: integer().notNull(),
    clearedBy: uuid()
      .notNull()
      .references(() => people.id),
    clearedAt: moment().notNull(),
  },
  (t) => [check('bags_pieces', sql`${t.pieces} >= 0`)],
);
