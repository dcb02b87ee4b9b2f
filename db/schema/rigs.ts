import { sql } from 'drizzle-orm';
import { bigint, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { Profile } from '@/lib/program/profile';
import type { RigReport } from '@/lib/protocol/report';
import { moment } from './columns';
import { people } from './people';
import { spools } from './stock';

/** The process beside the rigs. The pairing code and the token are stored hashed only. */
export const agents = pgTable('agents', {
  id: uuid().primaryKey().defaultRandom(),
  name: text().notNull().unique(),
  pairingCodeHash: text(),
  pairingExpiresAt: moment(),
  tokenHash: text().unique(),
  pairedAt: moment(),
  revokedAt: moment(),
  software: text(),
  lastReportAt: moment(),
  createdAt: moment().notNull().defaultNow(),
});

/** Through which sequence each journal of an agent is stored. */
export const agentJournals = pgTable(
  'agent_journals',
  {
    agentId: uuid()
      .notNull()
      .references(() => agents.id),
    journalId: uuid().notNull(),
    storedThrough: bigint({ mode: 'number' }).notNull().default(0),
    createdAt: moment().notNull().defaultNow(),
  },
  (t) => [uniqueIndex('agent_journals_key').on(t.agentId, t.journalId)],
);

/** `fence` goes up whenever the rig's work changes hands; older commands and programs are then refused. */
export const rigs = pgTable('rigs', {
  id: uuid().primaryKey().defaultRandom(),
  name: text().notNull().unique(),
  bay: text().notNull().default(''),
  benchOrder: integer().notNull(),
  agentId: uuid().references(() => agents.id),
  spoolId: uuid().references(() => spools.id),
  fence: integer().notNull().default(1),
  lastTag: integer().notNull().default(0),
  outOfServiceAt: moment(),
  outOfServiceBy: uuid().references(() => people.id),
  outOfServiceReason: text(),
  createdAt: moment().notNull().defaultNow(),
});

/** The latest report of each rig: what was read, and when it was heard. Overwritten; history is in the events. */
export const rigReports = pgTable('rig_reports', {
  rigId: uuid()
    .primaryKey()
    .references(() => rigs.id),
  heardAt: moment().notNull(),
  connectedAt: moment(),
  report: jsonb().$type<RigReport>().notNull(),
});

/** Versioned numbers of a rig; the newest version is in force. Appended only. */
export const profiles = pgTable(
  'profiles',
  {
    id: uuid().primaryKey().defaultRandom(),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    version: integer().notNull(),
    profile: jsonb().$type<Profile>().notNull(),
    reason: text().notNull().default(''),
    createdBy: uuid()
      .notNull()
      .references(() => people.id),
    createdAt: moment().notNull(),
  },
  (t) => [uniqueIndex('profiles_version_key').on(t.rigId, t.version)],
);

/** Versioned interlock notes of a rig: the short physical list and the full text. Appended only. */
export const interlockNotes = pgTable(
  'interlock_notes',
  {
    id: uuid().primaryKey().defaultRandom(),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    version: integer().notNull(),
    points: text().array().notNull(),
    fullText: text().notNull(),
    createdBy: uuid()
      .notNull()
      .references(() => people.id),
    createdAt: moment().notNull(),
  },
  (t) => [uniqueIndex('interlock_notes_version_key').on(t.rigId, t.version)],
);

/** "I am working on this rig": from `beganAt` to `endedAt`. At most one open a rig. */
export const workHolds = pgTable(
  'work_holds',
  {
    id: uuid().primaryKey().defaultRandom(),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    personId: uuid()
      .notNull()
      .references(() => people.id),
    reason: text().notNull().default(''),
    beganAt: moment().notNull(),
    /** The agent said that the rig stands still. */
    standstillAt: moment(),
    endedAt: moment(),
    endedBy: uuid().references(() => people.id),
  },
  (t) => [
    uniqueIndex('work_holds_one_open')
      .on(t.rigId)
      .where(sql`${t.endedAt} is null`),
    index('work_holds_rig').on(t.rigId, t.beganAt),
  ],
);
