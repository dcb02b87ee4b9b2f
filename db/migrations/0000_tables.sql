CREATE TABLE "batch_lines" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"batch_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"label" text NOT NULL,
	"wire_id" uuid NOT NULL,
	"length_mm" numeric(12, 3) NOT NULL,
	"tolerance_minus_mm" numeric(12, 3) NOT NULL,
	"tolerance_plus_mm" numeric(12, 3) NOT NULL,
	"pieces" integer NOT NULL,
	CONSTRAINT "batch_lines_pieces" CHECK ("batch_lines"."pieces" >= 0),
	CONSTRAINT "batch_lines_length" CHECK ("batch_lines"."length_mm" > 0)
);
--> statement-breakpoint
CREATE TABLE "batches" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"number" serial NOT NULL,
	"name" text NOT NULL,
	"due_at" timestamp (3) with time zone,
	"priority" integer DEFAULT 3 NOT NULL,
	"source_name" text,
	"source_sha256" text,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"queued_at" timestamp (3) with time zone,
	"withdrawn_at" timestamp (3) with time zone,
	"withdrawn_by" uuid,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "batches_number_unique" UNIQUE("number"),
	CONSTRAINT "batches_priority" CHECK ("batches"."priority" between 1 and 5)
);
--> statement-breakpoint
CREATE TABLE "lots" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"line_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"pieces" integer NOT NULL,
	"state" text DEFAULT 'waiting' NOT NULL,
	"rig_id" uuid,
	"waiting_reason" text DEFAULT '' NOT NULL,
	"queued_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "lots_pieces" CHECK ("lots"."pieces" between 0 and 9999),
	CONSTRAINT "lots_rig_held" CHECK (("lots"."rig_id" is not null) = ("lots"."state" in ('given', 'running', 'cut', 'bagged')))
);
--> statement-breakpoint
CREATE TABLE "audit_entries" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"person_id" uuid,
	"agent_id" uuid,
	"verb" text NOT NULL,
	"subject" text NOT NULL,
	"request_id" text NOT NULL,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "people" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"roles" text[] NOT NULL,
	"session_epoch" integer DEFAULT 1 NOT NULL,
	"disabled_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "people_roles_known" CHECK ("people"."roles" <@ array['operator','scheduler','maintainer','owner']::text[])
);
--> statement-breakpoint
CREATE TABLE "sign_in_attempts" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"subject" text NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "agent_journals" (
	"agent_id" uuid NOT NULL,
	"journal_id" uuid NOT NULL,
	"stored_through" bigint DEFAULT 0 NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "agents" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"pairing_code_hash" text,
	"pairing_expires_at" timestamp (3) with time zone,
	"token_hash" text,
	"paired_at" timestamp (3) with time zone,
	"revoked_at" timestamp (3) with time zone,
	"software" text,
	"last_report_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "agents_name_unique" UNIQUE("name"),
	CONSTRAINT "agents_tokenHash_unique" UNIQUE("token_hash")
);
--> statement-breakpoint
CREATE TABLE "interlock_notes" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"rig_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"points" text[] NOT NULL,
	"full_text" text NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "profiles" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"rig_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"profile" jsonb NOT NULL,
	"reason" text DEFAULT '' NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rig_reports" (
	"rig_id" uuid PRIMARY KEY NOT NULL,
	"heard_at" timestamp (3) with time zone NOT NULL,
	"connected_at" timestamp (3) with time zone,
	"report" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "rigs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"bay" text DEFAULT '' NOT NULL,
	"bench_order" integer NOT NULL,
	"agent_id" uuid,
	"spool_id" uuid,
	"fence" integer DEFAULT 1 NOT NULL,
	"last_tag" integer DEFAULT 0 NOT NULL,
	"out_of_service_at" timestamp (3) with time zone,
	"out_of_service_by" uuid,
	"out_of_service_reason" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "rigs_name_unique" UNIQUE("name")
);
--> statement-breakpoint
CREATE TABLE "work_holds" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"rig_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"reason" text DEFAULT '' NOT NULL,
	"began_at" timestamp (3) with time zone NOT NULL,
	"standstill_at" timestamp (3) with time zone,
	"ended_at" timestamp (3) with time zone,
	"ended_by" uuid
);
--> statement-breakpoint
CREATE TABLE "acknowledgements" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"run_id" uuid NOT NULL,
	"rig_id" uuid NOT NULL,
	"notes_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"full" boolean NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "bags" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"run_id" uuid NOT NULL,
	"code" text NOT NULL,
	"pieces" integer NOT NULL,
	"cleared_by" uuid NOT NULL,
	"cleared_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "bags_runId_unique" UNIQUE("run_id"),
	CONSTRAINT "bags_code_unique" UNIQUE("code"),
	CONSTRAINT "bags_pieces" CHECK ("bags"."pieces" >= 0)
);
--> statement-breakpoint
CREATE TABLE "measurements" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"piece" integer NOT NULL,
	"length_mm" numeric(12, 3) NOT NULL,
	"within_tolerance" boolean NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "misfeeds" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"rig_id" uuid NOT NULL,
	"piece" integer NOT NULL,
	"cause" text NOT NULL,
	"found_by" text NOT NULL,
	"person_id" uuid,
	"at" timestamp (3) with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "piece_entries" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"run_id" uuid NOT NULL,
	"kind" text NOT NULL,
	"pieces" integer NOT NULL,
	"reason" text NOT NULL,
	"person_id" uuid,
	"at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "piece_entries_kind" CHECK ("piece_entries"."kind" in ('scrap', 'sample', 'doubt'))
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"lot_id" uuid NOT NULL,
	"rig_id" uuid NOT NULL,
	"state" text DEFAULT 'prepared' NOT NULL,
	"fence" integer NOT NULL,
	"tag" integer NOT NULL,
	"pieces" integer NOT NULL,
	"length_mm" numeric(12, 3) NOT NULL,
	"wire_id" uuid NOT NULL,
	"spool_id" uuid,
	"blade_id" uuid,
	"profile_id" uuid NOT NULL,
	"first_pieces" integer NOT NULL,
	"program" text NOT NULL,
	"program_sha256" text NOT NULL,
	"expected_s" real NOT NULL,
	"program_held_at" timestamp (3) with time zone,
	"cut" integer DEFAULT 0 NOT NULL,
	"trims" integer DEFAULT 0 NOT NULL,
	"wire_used_mm" numeric(12, 3) DEFAULT 0 NOT NULL,
	"hold_reason" text,
	"hold_note" text DEFAULT '' NOT NULL,
	"measured_through" integer DEFAULT 0 NOT NULL,
	"doubt_piece" integer,
	"started_by" uuid,
	"prepared_at" timestamp (3) with time zone NOT NULL,
	"started_at" timestamp (3) with time zone,
	"last_piece_at" timestamp (3) with time zone,
	"state_since" timestamp (3) with time zone NOT NULL,
	"ended_at" timestamp (3) with time zone,
	"outcome" text,
	"surplus" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "runs_tag" CHECK ("runs"."tag" between 1 and 99),
	CONSTRAINT "runs_cut" CHECK ("runs"."cut" between 0 and "runs"."pieces")
);
--> statement-breakpoint
CREATE TABLE "blades" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"label" text NOT NULL,
	"model" text NOT NULL,
	"rig_id" uuid,
	"cuts" integer DEFAULT 0 NOT NULL,
	"fitted_at" timestamp (3) with time zone,
	"fitted_by" uuid,
	"removed_at" timestamp (3) with time zone,
	"removed_by" uuid,
	"removed_reason" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "blades_label_unique" UNIQUE("label")
);
--> statement-breakpoint
CREATE TABLE "spools" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"label" text NOT NULL,
	"wire_id" uuid NOT NULL,
	"length_mm" numeric(12, 3) NOT NULL,
	"used_mm" numeric(12, 3) DEFAULT 0 NOT NULL,
	"place" text DEFAULT '' NOT NULL,
	"ended_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "spools_label_unique" UNIQUE("label"),
	CONSTRAINT "spools_length" CHECK ("spools"."length_mm" > 0)
);
--> statement-breakpoint
CREATE TABLE "wires" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"gauge_awg" integer NOT NULL,
	"conductor" text NOT NULL,
	"insulation" text NOT NULL,
	"colour" text NOT NULL,
	"outside_diameter_mm" numeric(12, 3) NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "wires_gauge" CHECK ("wires"."gauge_awg" between 20 and 40)
);
--> statement-breakpoint
CREATE TABLE "alarms" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"priority" integer NOT NULL,
	"rig_id" uuid NOT NULL,
	"run_id" uuid,
	"raised_at" timestamp (3) with time zone NOT NULL,
	"acknowledged_by" uuid,
	"acknowledged_at" timestamp (3) with time zone,
	"ended_at" timestamp (3) with time zone,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "commands" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"rig_id" uuid NOT NULL,
	"agent_id" uuid NOT NULL,
	"person_id" uuid,
	"kind" text NOT NULL,
	"command" jsonb NOT NULL,
	"state" text DEFAULT 'pending' NOT NULL,
	"issued_at" timestamp (3) with time zone NOT NULL,
	"expires_at" timestamp (3) with time zone,
	"sent_at" timestamp (3) with time zone,
	"answered_at" timestamp (3) with time zone,
	"answer" jsonb
);
--> statement-breakpoint
CREATE TABLE "events" (
	"agent_id" uuid NOT NULL,
	"journal_id" uuid NOT NULL,
	"sequence" bigint NOT NULL,
	"rig_id" uuid,
	"run_id" uuid,
	"kind" text NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"received_at" timestamp (3) with time zone NOT NULL,
	"body" jsonb NOT NULL,
	CONSTRAINT "events_agent_id_journal_id_sequence_pk" PRIMARY KEY("agent_id","journal_id","sequence")
);
--> statement-breakpoint
CREATE TABLE "outbox" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"topic" text NOT NULL,
	"payload" jsonb NOT NULL,
	"created_at" timestamp (3) with time zone NOT NULL,
	"relayed_at" timestamp (3) with time zone,
	"done_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "heartbeats" (
	"name" text PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone NOT NULL,
	"detail" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "workshop" (
	"id" integer PRIMARY KEY DEFAULT 1 NOT NULL,
	"name" text DEFAULT 'Workshop' NOT NULL,
	"time_zone" text DEFAULT 'Europe/Vienna' NOT NULL,
	"shift_starts" text[] DEFAULT array['06:00','14:00','22:00'] NOT NULL,
	"first_pieces" integer DEFAULT 5 NOT NULL,
	"lot_pieces_most" integer DEFAULT 400 NOT NULL,
	"tolerance_minus_mm" integer DEFAULT 0 NOT NULL,
	"tolerance_plus_mm" integer DEFAULT 3 NOT NULL,
	CONSTRAINT "workshop_one_row" CHECK ("workshop"."id" = 1),
	CONSTRAINT "workshop_first_pieces" CHECK ("workshop"."first_pieces" between 0 and 50),
	CONSTRAINT "workshop_lot_pieces" CHECK ("workshop"."lot_pieces_most" between 1 and 9999)
);
--> statement-breakpoint
ALTER TABLE "batch_lines" ADD CONSTRAINT "batch_lines_batch_id_batches_id_fk" FOREIGN KEY ("batch_id") REFERENCES "public"."batches"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "batch_lines" ADD CONSTRAINT "batch_lines_wire_id_wires_id_fk" FOREIGN KEY ("wire_id") REFERENCES "public"."wires"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "batches" ADD CONSTRAINT "batches_created_by_people_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "batches" ADD CONSTRAINT "batches_withdrawn_by_people_id_fk" FOREIGN KEY ("withdrawn_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lots" ADD CONSTRAINT "lots_line_id_batch_lines_id_fk" FOREIGN KEY ("line_id") REFERENCES "public"."batch_lines"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "lots" ADD CONSTRAINT "lots_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_entries" ADD CONSTRAINT "audit_entries_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "agent_journals" ADD CONSTRAINT "agent_journals_agent_id_agents_id_fk" FOREIGN KEY ("agent_id") REFERENCES "public"."agents"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "interlock_notes" ADD CONSTRAINT "interlock_notes_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "interlock_notes" ADD CONSTRAINT "interlock_notes_created_by_people_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "profiles" ADD CONSTRAINT "profiles_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "profiles" ADD CONSTRAINT "profiles_created_by_people_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rig_reports" ADD CONSTRAINT "rig_reports_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rigs" ADD CONSTRAINT "rigs_agent_id_agents_id_fk" FOREIGN KEY ("agent_id") REFERENCES "public"."agents"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rigs" ADD CONSTRAINT "rigs_spool_id_spools_id_fk" FOREIGN KEY ("spool_id") REFERENCES "public"."spools"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "rigs" ADD CONSTRAINT "rigs_out_of_service_by_people_id_fk" FOREIGN KEY ("out_of_service_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "work_holds" ADD CONSTRAINT "work_holds_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "work_holds" ADD CONSTRAINT "work_holds_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "work_holds" ADD CONSTRAINT "work_holds_ended_by_people_id_fk" FOREIGN KEY ("ended_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgements" ADD CONSTRAINT "acknowledgements_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgements" ADD CONSTRAINT "acknowledgements_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgements" ADD CONSTRAINT "acknowledgements_notes_id_interlock_notes_id_fk" FOREIGN KEY ("notes_id") REFERENCES "public"."interlock_notes"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "acknowledgements" ADD CONSTRAINT "acknowledgements_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bags" ADD CONSTRAINT "bags_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "bags" ADD CONSTRAINT "bags_cleared_by_people_id_fk" FOREIGN KEY ("cleared_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "measurements" ADD CONSTRAINT "measurements_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "measurements" ADD CONSTRAINT "measurements_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "misfeeds" ADD CONSTRAINT "misfeeds_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "misfeeds" ADD CONSTRAINT "misfeeds_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "misfeeds" ADD CONSTRAINT "misfeeds_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "piece_entries" ADD CONSTRAINT "piece_entries_run_id_runs_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "piece_entries" ADD CONSTRAINT "piece_entries_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_lot_id_lots_id_fk" FOREIGN KEY ("lot_id") REFERENCES "public"."lots"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_wire_id_wires_id_fk" FOREIGN KEY ("wire_id") REFERENCES "public"."wires"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_spool_id_spools_id_fk" FOREIGN KEY ("spool_id") REFERENCES "public"."spools"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_blade_id_blades_id_fk" FOREIGN KEY ("blade_id") REFERENCES "public"."blades"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_profile_id_profiles_id_fk" FOREIGN KEY ("profile_id") REFERENCES "public"."profiles"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_started_by_people_id_fk" FOREIGN KEY ("started_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "blades" ADD CONSTRAINT "blades_fitted_by_people_id_fk" FOREIGN KEY ("fitted_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "blades" ADD CONSTRAINT "blades_removed_by_people_id_fk" FOREIGN KEY ("removed_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "spools" ADD CONSTRAINT "spools_wire_id_wires_id_fk" FOREIGN KEY ("wire_id") REFERENCES "public"."wires"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "alarms" ADD CONSTRAINT "alarms_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "alarms" ADD CONSTRAINT "alarms_acknowledged_by_people_id_fk" FOREIGN KEY ("acknowledged_by") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "commands" ADD CONSTRAINT "commands_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "public"."rigs"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "commands" ADD CONSTRAINT "commands_agent_id_agents_id_fk" FOREIGN KEY ("agent_id") REFERENCES "public"."agents"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "commands" ADD CONSTRAINT "commands_person_id_people_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."people"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "events" ADD CONSTRAINT "events_agent_id_agents_id_fk" FOREIGN KEY ("agent_id") REFERENCES "public"."agents"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "batch_lines_position_key" ON "batch_lines" USING btree ("batch_id","position");--> statement-breakpoint
CREATE INDEX "batches_source" ON "batches" USING btree ("source_sha256");--> statement-breakpoint
CREATE UNIQUE INDEX "lots_number_key" ON "lots" USING btree ("line_id","number");--> statement-breakpoint
CREATE UNIQUE INDEX "lots_one_per_rig" ON "lots" USING btree ("rig_id") WHERE "lots"."state" in ('given', 'running', 'cut');--> statement-breakpoint
CREATE INDEX "lots_state" ON "lots" USING btree ("state");--> statement-breakpoint
CREATE INDEX "audit_entries_subject" ON "audit_entries" USING btree ("subject","at");--> statement-breakpoint
CREATE UNIQUE INDEX "people_email_key" ON "people" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "sign_in_attempts_subject_at" ON "sign_in_attempts" USING btree ("subject","at");--> statement-breakpoint
CREATE UNIQUE INDEX "agent_journals_key" ON "agent_journals" USING btree ("agent_id","journal_id");--> statement-breakpoint
CREATE UNIQUE INDEX "interlock_notes_version_key" ON "interlock_notes" USING btree ("rig_id","version");--> statement-breakpoint
CREATE UNIQUE INDEX "profiles_version_key" ON "profiles" USING btree ("rig_id","version");--> statement-breakpoint
CREATE UNIQUE INDEX "work_holds_one_open" ON "work_holds" USING btree ("rig_id") WHERE "work_holds"."ended_at" is null;--> statement-breakpoint
CREATE INDEX "work_holds_rig" ON "work_holds" USING btree ("rig_id","began_at");--> statement-breakpoint
CREATE INDEX "acknowledgements_person" ON "acknowledgements" USING btree ("person_id","notes_id","at");--> statement-breakpoint
CREATE INDEX "acknowledgements_run" ON "acknowledgements" USING btree ("run_id");--> statement-breakpoint
CREATE INDEX "measurements_run" ON "measurements" USING btree ("run_id","piece");--> statement-breakpoint
CREATE INDEX "misfeeds_rig" ON "misfeeds" USING btree ("rig_id","at");--> statement-breakpoint
CREATE INDEX "piece_entries_run" ON "piece_entries" USING btree ("run_id");--> statement-breakpoint
CREATE UNIQUE INDEX "runs_one_active_per_rig" ON "runs" USING btree ("rig_id") WHERE "runs"."state" in ('prepared', 'cutting', 'paused', 'held', 'ended');--> statement-breakpoint
CREATE UNIQUE INDEX "runs_one_active_per_lot" ON "runs" USING btree ("lot_id") WHERE "runs"."state" in ('prepared', 'cutting', 'paused', 'held', 'ended');--> statement-breakpoint
CREATE INDEX "runs_state" ON "runs" USING btree ("state");--> statement-breakpoint
CREATE UNIQUE INDEX "blades_one_per_rig" ON "blades" USING btree ("rig_id") WHERE "blades"."rig_id" is not null and "blades"."removed_at" is null;--> statement-breakpoint
CREATE INDEX "spools_wire" ON "spools" USING btree ("wire_id");--> statement-breakpoint
CREATE UNIQUE INDEX "wires_kind_key" ON "wires" USING btree ("gauge_awg","conductor","insulation","colour");--> statement-breakpoint
CREATE UNIQUE INDEX "alarms_one_standing" ON "alarms" USING btree ("rig_id","kind") WHERE "alarms"."ended_at" is null;--> statement-breakpoint
CREATE INDEX "alarms_raised" ON "alarms" USING btree ("raised_at");--> statement-breakpoint
CREATE INDEX "commands_open" ON "commands" USING btree ("agent_id","issued_at") WHERE "commands"."state" in ('pending', 'sent');--> statement-breakpoint
CREATE INDEX "events_rig" ON "events" USING btree ("rig_id","received_at");--> statement-breakpoint
CREATE INDEX "events_run" ON "events" USING btree ("run_id");--> statement-breakpoint
CREATE INDEX "outbox_open" ON "outbox" USING btree ("id") WHERE "outbox"."done_at" is null;