-- The steps that lots and runs may take. The same list stands in lib/fleet; a test compares them.
CREATE TABLE "state_steps" (
  "machine" text NOT NULL,
  "from_state" text NOT NULL,
  "to_state" text NOT NULL,
  PRIMARY KEY ("machine", "from_state", "to_state")
);
--> statement-breakpoint
INSERT INTO "state_steps" ("machine", "from_state", "to_state") VALUES
  ('lots', 'waiting', 'given'), ('lots', 'waiting', 'withdrawn'),
  ('lots', 'given', 'waiting'), ('lots', 'given', 'running'), ('lots', 'given', 'withdrawn'),
  ('lots', 'running', 'cut'),
  ('lots', 'cut', 'bagged'), ('lots', 'cut', 'waiting'), ('lots', 'cut', 'withdrawn'),
  ('runs', 'prepared', 'cutting'), ('runs', 'prepared', 'held'), ('runs', 'prepared', 'dropped'), ('runs', 'prepared', 'released'),
  ('runs', 'cutting', 'paused'), ('runs', 'cutting', 'held'), ('runs', 'cutting', 'ended'), ('runs', 'cutting', 'released'),
  ('runs', 'paused', 'cutting'), ('runs', 'paused', 'held'), ('runs', 'paused', 'ended'), ('runs', 'paused', 'released'),
  ('runs', 'held', 'cutting'), ('runs', 'held', 'paused'), ('runs', 'held', 'ended'), ('runs', 'held', 'released'),
  ('runs', 'ended', 'cleared'), ('runs', 'released', 'cleared');
--> statement-breakpoint
CREATE FUNCTION "refuse_illegal_step"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.state IS DISTINCT FROM OLD.state AND NOT EXISTS (
    SELECT 1 FROM state_steps s
    WHERE s.machine = TG_TABLE_NAME AND s.from_state = OLD.state AND s.to_state = NEW.state
  ) THEN
    RAISE EXCEPTION 'illegal step of % from % to %', TG_TABLE_NAME, OLD.state, NEW.state
      USING ERRCODE = 'EW001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER "lots_legal_step" BEFORE UPDATE OF "state" ON "lots" FOR EACH ROW EXECUTE FUNCTION "refuse_illegal_step"();
--> statement-breakpoint
CREATE TRIGGER "runs_legal_step" BEFORE UPDATE OF "state" ON "runs" FOR EACH ROW EXECUTE FUNCTION "refuse_illegal_step"();
--> statement-breakpoint
CREATE FUNCTION "refuse_illegal_beginning"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.state <> TG_ARGV[0] THEN
    RAISE EXCEPTION '% must begin as %', TG_TABLE_NAME, TG_ARGV[0] USING ERRCODE = 'EW001';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER "lots_legal_beginning" BEFORE INSERT ON "lots" FOR EACH ROW EXECUTE FUNCTION "refuse_illegal_beginning"('waiting');
--> statement-breakpoint
CREATE TRIGGER "runs_legal_beginning" BEFORE INSERT ON "runs" FOR EACH ROW EXECUTE FUNCTION "refuse_illegal_beginning"('prepared');
--> statement-breakpoint
-- History is not rewritten: these tables only grow.
CREATE FUNCTION "refuse_rewriting"() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% is history and only grows', TG_TABLE_NAME USING ERRCODE = 'EW002';
END $$;
--> statement-breakpoint
DO $$
DECLARE t text;
BEGIN
  FOREACH t IN ARRAY ARRAY['events', 'acknowledgements', 'piece_entries', 'measurements', 'misfeeds', 'bags',
                           'profiles', 'interlock_notes', 'audit_entries'] LOOP
    EXECUTE format('CREATE TRIGGER %I BEFORE UPDATE OR DELETE ON %I FOR EACH ROW EXECUTE FUNCTION refuse_rewriting()', t || '_only_grow', t);
    EXECUTE format('CREATE TRIGGER %I BEFORE TRUNCATE ON %I FOR EACH STATEMENT EXECUTE FUNCTION refuse_rewriting()', t || '_not_emptied', t);
  END LOOP;
END $$;
--> statement-breakpoint
-- Lots of a queued line add up to its pieces; looked at when the transaction commits.
CREATE FUNCTION "lots_add_up"() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  line uuid;
  wanted integer;
  given integer;
BEGIN
  IF TG_TABLE_NAME = 'lots' THEN line := NEW.line_id; ELSE line := NEW.id; END IF;
  SELECT pieces INTO wanted FROM batch_lines WHERE id = line;
  SELECT sum(pieces) INTO given FROM lots WHERE line_id = line;
  IF given IS NOT NULL AND given <> wanted THEN
    RAISE EXCEPTION 'lots of line % hold % pieces, the line asks for %', line, given, wanted USING ERRCODE = 'EW003';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE CONSTRAINT TRIGGER "lots_add_up" AFTER INSERT OR UPDATE OF "pieces" ON "lots"
  DEFERRABLE INITIALLY DEFERRED FOR EACH ROW EXECUTE FUNCTION "lots_add_up"();
--> statement-breakpoint
CREATE CONSTRAINT TRIGGER "lines_add_up" AFTER UPDATE OF "pieces" ON "batch_lines"
  DEFERRABLE INITIALLY DEFERRED FOR EACH ROW EXECUTE FUNCTION "lots_add_up"();
--> statement-breakpoint
ALTER TABLE "blades" ADD CONSTRAINT "blades_rig_id_rigs_id_fk" FOREIGN KEY ("rig_id") REFERENCES "rigs"("id");
