import { randomUUID } from 'node:crypto';
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Pool } from 'pg';
import type { RigInput } from '@/agent/virtual/settings';
import { openDatabase, type Database } from '@/db/client';
import type { Profile } from '@/lib/program/profile';
import type { AgentEvent } from '@/lib/protocol/events';
import { addAgent } from '@/lib/services/agents/add-agent';
import { createBatch } from '@/lib/services/batches/create-batch';
import { addBlade } from '@/lib/services/blades/add-blade';
import { fitBlade } from '@/lib/services/blades/fit-blade';
import type { PersonActor } from '@/lib/services/context';
import { createFirstOwner } from '@/lib/services/people/create-first-owner';
import { addRig } from '@/lib/services/rigs/add-rig';
import { publishNotes } from '@/lib/services/rigs/publish-notes';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { addSpool } from '@/lib/services/spools/add-spool';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { addWire } from '@/lib/services/wires/add-wire';
import type { ContextNow } from '@/scripts/hands/actors';
import { benchProfile } from '@/tests/support/agent-bench';
import type { RunRecord } from './judge';
import type { Glance } from './people';
import { canMount, Stand } from './stand';
import type { Order } from './truth';

const SPOOL_MM = 100_000;
const COLOURS = ['BK', 'BN', 'RD', 'OG', 'YE', 'GN', 'BU', 'VT'];

/** What a bench is to have. `kind` says what is fitted, from 0 to `BENCH_KINDS` - 1. */
export interface WantedBench {
  kind: number;
  agentProgram: readonly string[];
}

export const BENCH_KINDS = 8;

export interface Bench {
  kind: number;
  stand: Stand;
  wireId: string;
  profile: Profile;
}

interface RunRow {
  runId: string;
  tag: number;
  cut: number;
  lengthMm: number;
}

/** The workshop of the harness in a house without demo: an owner, and one agent with one virtual rig per bench. */
export class Workshop {
  readonly benches: Bench[] = [];
  readonly ownDisks: boolean;
  #owner: PersonActor | null = null;

  private constructor(
    private readonly server: string,
    private readonly folder: string,
    private readonly repo: string,
    private readonly db: Database,
    private readonly pool: Pool,
  ) {
    this.ownDisks = canMount(join(folder, 'disk'));
  }

  static async open(
    house: { url: string; databaseUrl: string; folder: string; repo: string },
    wanted: readonly WantedBench[],
  ) {
    const { db, pool } = openDatabase(house.databaseUrl, { connectTimeoutMs: 1_500 });
    // A server that is restarted cuts them all; each call tells it again.
    pool.on('error', () => undefined);
    const workshop = new Workshop(house.url, house.folder, house.repo, db, pool);
    try {
      await workshop.#found();
      for (const bench of wanted) await workshop.#addBench(bench);
      return workshop;
    } catch (error) {
      await workshop.close();
      throw error;
    }
  }

  /** The owner, who may do all that an operator and a scheduler may. */
  readonly now: ContextNow = () => {
    if (!this.#owner) throw new Error('The workshop has no owner yet');
    return { actor: this.#owner, db: this.db, now: new Date(), requestId: `faults-${randomUUID()}` };
  };

  async order(bench: Bench, pieces: number, lengthMm: number, name: string): Promise<string> {
    const line = {
      label: 'a-b',
      wireId: bench.wireId,
      lengthMm,
      toleranceMinusMm: 1,
      tolerancePlusMm: 2,
      pieces,
    };
    const input = { name, dueAt: null, priority: 1, lines: [line], queue: true };
    return (await createBatch({ ctx: this.now(), input })).batchId;
  }

  /** A new spool of its wire, so that no schedule runs short. */
  async loadNewSpool({ stand, wireId }: Bench): Promise<void> {
    const input = { label: `S-${randomUUID().slice(0, 8)}`, wireId, lengthMm: SPOOL_MM };
    const spool = await addSpool({ ctx: this.now(), input });
    await loadSpool({ ctx: this.now(), input: { rigId: stand.rigId, spoolId: spool.id } });
  }

  /** Pieces in bags of a batch, and whether any of its runs still owns a rig. */
  async progress(batchId: string): Promise<{ bagged: number; active: number }> {
    const { rows } = await this.pool.query<{ bagged: number; active: number }>(
      `select coalesce(sum(b.pieces), 0)::int as bagged,
         count(*) filter (where r.state not in ('cleared', 'dropped'))::int as active
       from batch_lines l join lots o on o.line_id = l.id join runs r on r.lot_id = o.id
         left join bags b on b.run_id = r.id
       where l.batch_id = $1`,
      [batchId],
    );
    return rows[0] ?? { bagged: 0, active: 0 };
  }

  async glance(rigId: string): Promise<Glance> {
    const { rows } = await this.pool.query<Glance>(
      `select r.state, r.hold_reason as hold, coalesce(r.cut, 0) as cut,
         r.program_held_at is not null as "programHeld",
         exists (select 1 from work_holds w where w.rig_id = g.id and w.ended_at is null) as "workHold"
       from rigs g left join runs r on r.rig_id = g.id and r.state not in ('cleared', 'dropped')
       where g.id = $1`,
      [rigId],
    );
    const [row] = rows;
    if (!row) throw new Error('There is no such rig');
    return row;
  }

  async orderOf(runId: string, feedPerMm: number): Promise<Order> {
    const { rows } = await this.pool.query<Pick<RunRow, 'tag' | 'lengthMm'>>(
      'select tag, length_mm::float8 as "lengthMm" from runs where id = $1',
      [runId],
    );
    const [row] = rows;
    if (!row) throw new Error('There is no such run');
    return { ...row, feedPerMm };
  }

  /** All that the server has of a batch's runs. */
  async runsOf(batchId: string, feedPerMm: number): Promise<RunRecord[]> {
    const { rows } = await this.pool.query<RunRow>(
      `select r.id as "runId", r.tag, r.cut, r.length_mm::float8 as "lengthMm"
       from batch_lines l join lots o on o.line_id = l.id join runs r on r.lot_id = o.id
       where l.batch_id = $1 order by r.prepared_at`,
      [batchId],
    );
    return Promise.all(
      rows.map(async (row) => ({ ...row, feedPerMm, events: await this.#eventsOf(row.runId) })),
    );
  }

  async close(): Promise<void> {
    await Promise.all(this.benches.map(({ stand }) => stand.close()));
    await this.pool.end();
  }

  async #eventsOf(runId: string): Promise<RunRecord['events']> {
    const { rows } = await this.pool.query<{ at: Date; body: AgentEvent['body'] }>(
      'select at, body from events where run_id = $1 order by received_at, sequence',
      [runId],
    );
    return rows.map(({ at, body }) => ({ atMs: at.getTime(), body }));
  }

  async #found(): Promise<void> {
    const ctx = { ...this.#system(), actor: { kind: 'system' as const } };
    const person = { name: 'Owner', email: 'owner@faults.example', password: randomUUID() };
    const { id } = await createFirstOwner({ ctx, input: { workshopName: 'Faults', ...person } });
    this.#owner = {
      kind: 'person',
      personId: id,
      name: 'Owner',
      roles: ['owner', 'operator', 'scheduler', 'maintainer'],
    };
  }

  #system() {
    return { db: this.db, now: new Date(), requestId: 'faults' };
  }

  async #addBench({ kind, agentProgram }: WantedBench): Promise<void> {
    const ctx = this.now();
    const number = this.benches.length + 1;
    const name = `Rig ${number}`;
    const profile = profileOf(kind);
    const made = { gaugeAwg: 26 + 2 * Math.floor(number / COLOURS.length), conductor: 'silvered copper' };
    const sheath = { insulation: 'ETFE', outsideDiameterMm: 0.5 };
    const colour = COLOURS[number % COLOURS.length];
    const { id: wireId } = await addWire({ ctx, input: { ...made, ...sheath, colour } });
    const { id: rigId } = await addRig({ ctx, input: { name, benchOrder: number } });
    await publishProfile({ ctx, input: { rigId, profile, reason: 'first profile' } });
    const fullText = 'Shut the guard, keep hands out of the jaws, know where the hardware stop is.';
    await publishNotes({ ctx, input: { rigId, points: ['The guard is shut.'], fullText } });
    const blade = await addBlade({ ctx, input: { label: `B-${number}`, model: 'flush cutter' } });
    await fitBlade({ ctx, input: { bladeId: blade.id, rigId } });
    const offer = await addAgent({ ctx, input: { name: `Agent ${number}`, rigIds: [rigId] } });
    const folder = join(this.folder, `bench-${number}`);
    mkdirSync(folder, { recursive: true });
    const stand = await Stand.open({
      rigName: name,
      rigId,
      folder,
      server: this.server,
      repo: this.repo,
      agentProgram,
      pairingCode: offer.code,
      settings: { ...settingsOf(profile, kind), seed: kind + 1, name },
      ownDisk: this.ownDisks,
    });
    const bench = { kind, stand, wireId, profile };
    this.benches.push(bench);
    await this.loadNewSpool(bench);
  }
}

/** The benches differ in what is fitted and in how the board takes an opened port. */
function profileOf(kind: number): Profile {
  return {
    ...benchProfile,
    // Two feeds to most pieces, so that there is something between them.
    feed: { ...benchProfile.feed, longestMoveMm: 50 },
    fitted: {
      ...benchProfile.fitted,
      guardCutsMotorPower: kind % 2 === 1,
      display: kind % 4 === 0,
      beeper: false,
      heater: kind % 3 === 0,
      emergencyParser: kind % 4 < 2,
    },
    serial: { ...benchProfile.serial, resetsOnOpen: kind % 4 >= 2 },
  };
}

function settingsOf({ fitted, serial, registerAxis }: Profile, kind: number): RigInput {
  return {
    resetOnOpen: serial.resetsOnOpen,
    registerAxis: registerAxis ?? 'Y',
    firmware: {
      emergencyParser: fitted.emergencyParser,
      display: fitted.display,
      advancedOk: kind % 3 === 1,
      // On the wall clock: as much faster as the agent's waits are.
      keepaliveMs: 500,
    },
    mechanics: { guardCutsMotorPower: fitted.guardCutsMotorPower },
  };
}
