import { sql } from 'drizzle-orm';
import { check, index, integer, pgTable, serial, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { LotState } from '@/lib/fleet/lot';
import { millimetres, moment } from './columns';
import { people } from './people';
import { rigs } from './rigs';
import { wires } from './stock';

/** An order to cut. `priority` 1 is first. A withdrawn batch keeps what was cut of it. */
export const batches = pgTable(
  'batches',
  {
    id: uuid().primaryKey().defaultRandom(),
    number: serial().notNull().unique(),
    name: text().notNull(),
    dueAt: moment(),
    priority: integer().notNull().default(3),
    sourceName: text(),
    sourceSha256: text(),
    createdBy: uuid()
      .notNull()
      .references(() => people.id),
    createdAt: moment().notNull(),
    queuedAt: moment(),
    withdrawnAt: moment(),
    withdrawnBy: uuid().references(() => people.id),
    /** Goes up with each change, so that two people cannot overwrite each other. */
    revision: integer().notNull().default(1),
  },
  (t) => [
    check('batches_priority', sql`${t.priority} between 1 and 5`),
    index('batches_source').on(t.sourceSha256),
  ],
);

export const batchLines = pgTable(
  'batch_lines',
  {
    id: uuid().primaryKey().defaultRandom(),
    batchId: uuid()
      .notNull()
      .references(() => batches.id),
    position: integer().notNull(),
    label: text().notNull(),
    wireId: uuid()
      .notNull()
      .references(() => wires.id),
    lengthMm: millimetres().notNull(),
    toleranceMinusMm: millimetres().notNull(),
    tolerancePlusMm: millimetres().notNull(),
    pieces: integer().notNull(),
  },
  (t) => [
    uniqueIndex('batch_lines_position_key').on(t.batchId, t.position),
    check('batch_lines_pieces', sql`${t.pieces} >= 0`),
    check('batch_lines_length', sql`${t.lengthMm} > 0`),
  ],
);

/** The part of a line given to one rig. All lots of a line add up to its pieces (checked at commit). */
export const lots = pgTable(
  'lots',
  {
    id: uuid().primaryKey().defaultRandom(),
    lineId: uuid()
      .notNull()
      .references(() => batchLines.id),
    number: integer().notNull(),
    pieces: integer().notNull(),
    state: text().$type<LotState>().notNull().default('waiting'),
    rigId: uuid().references(() => rigs.id),
    /** Why it waits, for a person; written by dispatch. */
    waitingReason: text().notNull().default(''),
    queuedAt: moment().notNull(),
  },
  (t) => [
    uniqueIndex('lots_number_key').on(t.lineId, t.number),
    uniqueIndex('lots_one_per_rig')
      .on(t.rigId)
      .where(sql`${t.state} in ('given', 'running', 'cut')`),
    index('lots_state').on(t.state),
    check('lots_pieces', sql`${t.pieces} between 0 and 9999`),
    check(
      'lots_rig_held',
      sql`(${t.rigId} is not null) = (${t.state} in ('given', 'running', 'cut', 'bagged'))`,
    ),
  ],
);
