import { sql } from 'drizzle-orm';
import {
  bigint,
  bigserial,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import type { AlarmKind } from '@/lib/fleet/alarms';
import type { Command, CommandAnswer } from '@/lib/protocol/commands';
import type { EventBody } from '@/lib/protocol/events';
import { moment } from './columns';
import { people } from './people';
import { agents, rigs } from './rigs';

/** Everything agents reported, each once by (agent, journal, sequence). Appended only. */
export const events = pgTable(
  'events',
  {
    agentId: uuid()
      .notNull()
      .references(() => agents.id),
    journalId: uuid().notNull(),
    sequence: bigint({ mode: 'number' }).notNull(),
    rigId: uuid(),
    runId: uuid(),
    kind: text().notNull(),
    at: moment().notNull(),
    receivedAt: moment().notNull(),
    body: jsonb().$type<EventBody>().notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.agentId, t.journalId, t.sequence] }),
    index('events_rig').on(t.rigId, t.receivedAt),
    index('events_run').on(t.runId),
  ],
);

/** `sent`: written to the agent's stream at least once. `expired`: too late, nothing was done. */
export const commands = pgTable(
  'commands',
  {
    id: uuid().primaryKey().defaultRandom(),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    agentId: uuid()
      .notNull()
      .references(() => agents.id),
    personId: uuid().references(() => people.id),
    kind: text().$type<Command['kind']>().notNull(),
    command: jsonb().$type<Command>().notNull(),
    state: text().$type<'pending' | 'sent' | 'done' | 'refused' | 'expired'>().notNull().default('pending'),
    issuedAt: moment().notNull(),
    /** Not delivered after this; null: until it is answered. */
    expiresAt: moment(),
    sentAt: moment(),
    answeredAt: moment(),
    answer: jsonb().$type<CommandAnswer>(),
  },
  (t) => [
    index('commands_open')
      .on(t.agentId, t.issuedAt)
      .where(sql`${t.state} in ('pending', 'sent')`),
  ],
);

/** What a person must act on. At most one standing a rig and kind. */
export const alarms = pgTable(
  'alarms',
  {
    id: uuid().primaryKey().defaultRandom(),
    kind: text().$type<AlarmKind>().notNull(),
    priority: integer().notNull(),
    rigId: uuid()
      .notNull()
      .references(() => rigs.id),
    runId: uuid(),
    raisedAt: moment().notNull(),
    acknowledgedBy: uuid().references(() => people.id),
    acknowledgedAt: moment(),
    endedAt: moment(),
    details: jsonb().$type<Record<string, string | number>>().notNull().default({}),
  },
  (t) => [
    uniqueIndex('alarms_one_standing')
      .on(t.rigId, t.kind)
      .where(sql`${t.endedAt} is null`),
    index('alarms_raised').on(t.raisedAt),
  ],
);

/** What a committed change causes; written in its transaction, relayed to the job queue by the worker. */
export const outbox = pgTable(
  'outbox',
  {
    id: bigserial({ mode: 'number' }).primaryKey(),
    topic: text().notNull(),
    payload: jsonb().$type<Record<string, unknown>>().notNull(),
    createdAt: moment().notNull(),
    relayedAt: moment(),
    doneAt: moment(),
  },
  (t) => [
    index('outbox_open')
      .on(t.id)
      .where(sql`${t.doneAt} is null`),
  ],
);
