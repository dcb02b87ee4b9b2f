import { sql } from 'drizzle-orm';
import {
  bigserial,
  check,
  index,
  integer,
  jsonb,
  pgTable,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import type { Role } from '@/lib/fleet/rights';
import { moment } from './columns';

/** `sessionEpoch` goes up when all sessions of the person must end. */
export const people = pgTable(
  'people',
  {
    id: uuid().primaryKey().defaultRandom(),
    email: text().notNull(),
    name: text().notNull(),
    passwordHash: text().notNull(),
    roles: text().array().$type<Role[]>().notNull(),
    sessionEpoch: integer().notNull().default(1),
    disabledAt: moment(),
    createdAt: moment().notNull().defaultNow(),
  },
  (t) => [
    uniqueIndex('people_email_key').on(sql`lower(${t.email})`),
    check(
      'people_roles_known',
      sql`${t.roles} <@ array['operator','scheduler','maintainer','owner']::text[]`,
    ),
  ],
);

/** Refused sign-ins, counted per account and per address; old rows are swept by the worker. */
export const signInAttempts = pgTable(
  'sign_in_attempts',
  { id: bigserial({ mode: 'number' }).primaryKey(), subject: text().notNull(), at: moment().notNull() },
  (t) => [index('sign_in_attempts_subject_at').on(t.subject, t.at)],
);

/** Who did what to what; appended only. */
export const auditEntries = pgTable(
  'audit_entries',
  {
    id: bigserial({ mode: 'number' }).primaryKey(),
    at: moment().notNull(),
    personId: uuid().references(() => people.id),
    agentId: uuid(),
    verb: text().notNull(),
    subject: text().notNull(),
    requestId: text().notNull(),
    details: jsonb().$type<Record<string, unknown>>().notNull().default({}),
  },
  (t) => [index('audit_entries_subject').on(t.subject, t.at)],
);
