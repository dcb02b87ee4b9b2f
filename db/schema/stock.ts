import { sql } from 'drizzle-orm';
import { check, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { millimetres, moment } from './columns';
import { people } from './people';

/** A kind of wire. `colour` in IEC 60757 letters. */
export const wires = pgTable(
  'wires',
  {
    id: uuid().primaryKey().defaultRandom(),
    gaugeAwg: integer().notNull(),
    conductor: text().notNull(),
    insulation: text().notNull(),
    colour: text().notNull(),
    outsideDiameterMm: millimetres().notNull(),
    createdAt: moment().notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('wires_kind_key').on(t.gaugeAwg, t.conductor, t.insulation, t.colour),
    check('wires_gauge', sql`${t.gaugeAwg} between 20 and 40`),
  ],
);

/** One reel. What is left is `lengthMm` less what `spool_uses` charged. */
export const spools = pgTable(
  'spools',
  {
    id: uuid().primaryKey().defaultRandom(),
    label: text().notNull().unique(),
    wireId: uuid()
      .notNull()
      .references(() => wires.id),
    lengthMm: millimetres().notNull(),
    usedMm: millimetres().notNull().default(0),
    place: text().notNull().default(''),
    endedAt: moment(),
    createdAt: moment().notNull().defaultNow(),
  },
  (t) => [check('spools_length', sql`${t.lengthMm} > 0`), index('spools_wire').on(t.wireId)],
);

/** One physical cutter, from fitting to removal; `cuts` counts every closing it made, trims too. */
export const blades = pgTable(
  'blades',
  {
    id: uuid().primaryKey().defaultRandom(),
    label: text().notNull().unique(),
    model: text().notNull(),
    rigId: uuid(),
    cuts: integer().notNull().default(0),
    fittedAt: moment(),
    fittedBy: uuid().references(() => people.id),
    removedAt: moment(),
    removedBy: uuid().references(() => people.id),
    removedReason: text(),
    createdAt: moment().notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('blades_one_per_rig')
      .on(t.rigId)
      .where(sql`${t.rigId} is not null and ${t.removedAt} is null`),
  ],
);
