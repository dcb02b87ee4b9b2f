import type { Db } from '@/db/client';
import type { Role } from '@/lib/fleet/rights';

/** A signed-in person as services see them. */
export interface PersonActor {
  kind: 'person';
  personId: string;
  name: string;
  roles: readonly Role[];
}

/** An agent that showed its token. */
export interface AgentActor {
  kind: 'agent';
  agentId: string;
  name: string;
}

/** Ellwand's own worker: dispatch, sweeps, mail. */
export interface SystemActor {
  kind: 'system';
}

export type Actor = PersonActor | AgentActor | SystemActor;

/** What every service is handed. `db` may be an open transaction; `now` is the time of the request. */
export interface ServiceContext<A extends Actor = Actor> {
  actor: A;
  db: Db;
  now: Date;
  requestId: string;
}
