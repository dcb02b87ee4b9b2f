import { sql } from 'drizzle-orm';
import { check, integer, pgTable, text } from 'drizzle-orm/pg-core';
import { moment } from './columns';

/** The workshop's own settings: one row. Shift starts are local times `HH:MM`. */
export const workshop = pgTable(
  'workshop',
  {
    id: integer().primaryKey().default(1),
    name: text().notNull().default('Workshop'),
    timeZone: text().notNull().default('Europe/Vienna'),
    shiftStarts: text()
      .array()
      .notNull()
      .default(sql`array['06:00','14:00','22:00']`),
    firstPieces: integer().notNull().default(5),
    lotPiecesMost: integer().notNull().default(400),
    toleranceMinusMm: integer().notNull().default(0),
    tolerancePlusMm: integer().notNull().default(3),
  },
  (t) => [
    check('workshop_one_row', sql`${t.id} = 1`),
    check('workshop_first_pieces', sql`${t.firstPieces} between 0 and 50`),
    check('workshop_lot_pieces', sql`${t.lotPiecesMost} between 1 and 9999`),
  ],
);

/** Signs of life of background processes; `detail` says what is wrong, empty when nothing is. */
export const heartbeats = pgTable('heartbeats', {
  name: text().primaryKey(),
  at: moment().notNull(),
  detail: text().notNull().default(''),
});
