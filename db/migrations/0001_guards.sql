-- What must be true is proved here, whatever the application believes. Each refusal has a code of its own in
-- the application's class NL001..NL0nn, so that commands can tell them apart from bugs.

-- The ledger is only ever added to.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION '% of % is refused: it is only ever added to', TG_OP, TG_TABLE_NAME USING ERRCODE = 'NL001';
END $$;
--> statement-breakpoint
CREATE TRIGGER ledger_entries_append_only BEFORE UPDATE OR DELETE ON ledger_entries FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_entries_no_truncate BEFORE TRUNCATE ON ledger_entries FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_private_no_delete BEFORE DELETE ON ledger_private FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER ledger_private_no_truncate BEFORE TRUNCATE ON ledger_private FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER payments_append_only BEFORE UPDATE OR DELETE ON payments FOR EACH ROW EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER payments_no_truncate BEFORE TRUNCATE ON payments FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint

-- The private part of an entry may be erased, never rewritten.
CREATE FUNCTION ledger_private_only_erased() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.entry_id <> OLD.entry_id OR NEW.salt IS NOT NULL OR NEW.body IS NOT NULL OR NEW.erased_at IS NULL THEN
    RAISE EXCEPTION 'the private part of a ledger entry can only be erased' USING ERRCODE = 'NL002';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER ledger_private_only_erased BEFORE UPDATE ON ledger_private FOR EACH ROW EXECUTE FUNCTION ledger_private_only_erased();
--> statement-breakpoint

-- Entries of one edition are numbered from 1 without gaps.
CREATE FUNCTION ledger_line_follows() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF NEW.line <> 1 + coalesce((SELECT max(line) FROM ledger_entries WHERE edition_id = NEW.edition_id), 0) THEN
    RAISE EXCEPTION 'ledger line % does not follow the last line of its edition', NEW.line USING ERRCODE = 'NL003';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER ledger_line_follows BEFORE INSERT ON ledger_entries FOR EACH ROW EXECUTE FUNCTION ledger_line_follows();
--> statement-breakpoint

-- How many copies a run of an edition may have.
CREATE FUNCTION run_size(e editions, r run) RETURNS integer LANGUAGE sql IMMUTABLE AS $$
  SELECT CASE r
    WHEN 'numbered' THEN e."limit" WHEN 'ap' THEN e.artists_proofs WHEN 'pp' THEN e.printers_proofs
    WHEN 'hc' THEN e.hors_commerce WHEN 'bat' THEN e.bon_a_tirer WHEN 'exhibition' THEN e.exhibition_copies END
$$;
--> statement-breakpoint
CREATE FUNCTION copy_guard() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE e editions;
BEGIN
  IF TG_OP = 'DELETE' THEN
    SELECT * INTO e FROM editions WHERE id = OLD.edition_id;
    IF e.first_issued_at IS NOT NULL OR OLD.placement <> 'in_hand' THEN
      RAISE EXCEPTION 'a copy of an edition whose numbers have been issued cannot be removed' USING ERRCODE = 'NL004';
    END IF;
    RETURN OLD;
  END IF;
  SELECT * INTO e FROM editions WHERE id = NEW.edition_id;
  IF NEW.number > run_size(e, NEW.run) THEN
    RAISE EXCEPTION 'number % is past the limit of its run', NEW.number USING ERRCODE = 'NL005';
  END IF;
  IF TG_OP = 'UPDATE' THEN
    IF (NEW.id, NEW.edition_id, NEW.run, NEW.number) IS DISTINCT FROM (OLD.id, OLD.edition_id, OLD.run, OLD.number) THEN
      RAISE EXCEPTION 'a copy keeps its edition, run and number for ever' USING ERRCODE = 'NL006';
    END IF;
    IF NEW.placement <> OLD.placement AND NOT (
      (OLD.placement = 'in_hand' AND NEW.placement IN ('held', 'set_aside', 'sold', 'given', 'kept', 'consigned', 'retired')) OR
      (OLD.placement = 'held' AND NEW.placement IN ('in_hand', 'sold')) OR
      (OLD.placement = 'set_aside' AND NEW.placement IN ('in_hand', 'sold', 'given', 'kept', 'consigned', 'retired')) OR
      (OLD.placement = 'sold' AND NEW.placement IN ('in_hand', 'coming_back')) OR
      (OLD.placement = 'coming_back' AND NEW.placement IN ('in_hand', 'retired')) OR
      (OLD.placement = 'kept' AND NEW.placement IN ('in_hand', 'retired')) OR
      (OLD.placement = 'consigned' AND NEW.placement IN ('in_hand', 'sold', 'retired'))
    ) THEN
      RAISE EXCEPTION 'a copy cannot go from % to %', OLD.placement, NEW.placement USING ERRCODE = 'NL007';
    END IF;
    IF NEW.placement = 'sold' AND OLD.placement = 'held' AND NEW.order_line_id IS DISTINCT FROM OLD.order_line_id THEN
      RAISE EXCEPTION 'a held copy is sold only to the order that holds it' USING ERRCODE = 'NL008';
    END IF;
  END IF;
  IF NEW.run = 'numbered' AND NEW.placement IN ('sold', 'given', 'kept', 'consigned') AND e.first_issued_at IS NULL THEN
    UPDATE editions SET first_issued_at = now() WHERE id = NEW.edition_id AND first_issued_at IS NULL;
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER copy_guard BEFORE INSERT OR UPDATE OR DELETE ON copies FOR EACH ROW EXECUTE FUNCTION copy_guard();
--> statement-breakpoint
CREATE TRIGGER copies_no_truncate BEFORE TRUNCATE ON copies FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint

-- A held copy has a live hold of its order line, and nothing else has one; checked when the transaction ends.
CREATE FUNCTION copy_hold_agrees() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE c copies; h holds;
BEGIN
  IF TG_TABLE_NAME = 'copies' THEN
    SELECT * INTO c FROM copies WHERE id = NEW.id;
  ELSE
    SELECT * INTO c FROM copies WHERE id = NEW.copy_id;
  END IF;
  IF NOT FOUND THEN RETURN NULL; END IF;
  SELECT * INTO h FROM holds WHERE copy_id = c.id AND ended_at IS NULL;
  IF (c.placement = 'held') <> (h.id IS NOT NULL) OR (c.placement = 'held' AND c.order_line_id <> h.order_line_id) THEN
    RAISE EXCEPTION 'placement and hold of a copy disagree' USING ERRCODE = 'NL009';
  END IF;
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE CONSTRAINT TRIGGER copy_hold_agrees AFTER INSERT OR UPDATE ON copies DEFERRABLE INITIALLY DEFERRED FOR EACH ROW EXECUTE FUNCTION copy_hold_agrees();
--> statement-breakpoint
CREATE CONSTRAINT TRIGGER hold_copy_agrees AFTER INSERT OR UPDATE ON holds DEFERRABLE INITIALLY DEFERRED FOR EACH ROW EXECUTE FUNCTION copy_hold_agrees();
--> statement-breakpoint

-- The limit may fall until the first number is issued; from then on the denominator never changes.
CREATE FUNCTION edition_guard() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    IF OLD.state <> 'draft' THEN
      RAISE EXCEPTION 'an edition that was opened stays in the book' USING ERRCODE = 'NL010';
    END IF;
    RETURN OLD;
  END IF;
  IF OLD.first_issued_at IS NOT NULL AND (NEW."limit" <> OLD."limit" OR NEW.first_issued_at IS DISTINCT FROM OLD.first_issued_at) THEN
    RAISE EXCEPTION 'the limit never changes once a number has been issued' USING ERRCODE = 'NL011';
  END IF;
  IF OLD.state <> 'draft' THEN
    IF NEW."limit" > OLD."limit" OR NEW.artists_proofs > OLD.artists_proofs OR NEW.printers_proofs > OLD.printers_proofs
       OR NEW.hors_commerce > OLD.hors_commerce OR NEW.bon_a_tirer > OLD.bon_a_tirer OR NEW.exhibition_copies > OLD.exhibition_copies THEN
      RAISE EXCEPTION 'the limit of an open edition may fall, never rise' USING ERRCODE = 'NL012';
    END IF;
    IF NEW.state = 'draft' OR NEW.print_id <> OLD.print_id OR (OLD.state = 'closed' AND NEW.state <> 'closed') THEN
      RAISE EXCEPTION 'an edition that was opened stays in the book' USING ERRCODE = 'NL010';
    END IF;
    IF NEW."limit" < OLD."limit" AND EXISTS (SELECT 1 FROM copies WHERE edition_id = NEW.id AND run = 'numbered' AND number > NEW."limit") THEN
      RAISE EXCEPTION 'copies past the new limit must be removed first' USING ERRCODE = 'NL013';
    END IF;
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER edition_guard BEFORE UPDATE OR DELETE ON editions FOR EACH ROW EXECUTE FUNCTION edition_guard();
--> statement-breakpoint

-- Formats and prices of an open edition: formats stay, prices are superseded by new dated rows.
CREATE FUNCTION format_guard() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (SELECT state FROM editions WHERE id = OLD.edition_id) <> 'draft' THEN
    RAISE EXCEPTION 'the formats of an open edition do not change' USING ERRCODE = 'NL014';
  END IF;
  RETURN CASE TG_OP WHEN 'DELETE' THEN OLD ELSE NEW END;
END $$;
--> statement-breakpoint
CREATE TRIGGER format_guard BEFORE UPDATE OR DELETE ON formats FOR EACH ROW EXECUTE FUNCTION format_guard();
--> statement-breakpoint
CREATE FUNCTION price_step_guard() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF (SELECT e.state FROM editions e JOIN formats f ON f.edition_id = e.id WHERE f.id = OLD.format_id) <> 'draft' THEN
    IF TG_OP = 'DELETE' OR OLD.superseded_at IS NOT NULL OR NEW.superseded_at IS NULL
       OR (NEW.format_id, NEW.from_number, NEW.to_number, NEW.amount, NEW.currency, NEW.valid_from)
          IS DISTINCT FROM (OLD.format_id, OLD.from_number, OLD.to_number, OLD.amount, OLD.currency, OLD.valid_from) THEN
      RAISE EXCEPTION 'a price of an open edition is superseded, never rewritten' USING ERRCODE = 'NL015';
    END IF;
  END IF;
  RETURN CASE TG_OP WHEN 'DELETE' THEN OLD ELSE NEW END;
END $$;
--> statement-breakpoint
CREATE TRIGGER price_step_guard BEFORE UPDATE OR DELETE ON price_steps FOR EACH ROW EXECUTE FUNCTION price_step_guard();
--> statement-breakpoint

-- A sheet that was signed carries its denominator: that, too, issues the number.
CREATE FUNCTION sheet_guard() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'a sheet stays in the book' USING ERRCODE = 'NL016';
  END IF;
  IF TG_OP = 'UPDATE' AND (NEW.copy_id, NEW.print_picture_id, NEW.serial) IS DISTINCT FROM (OLD.copy_id, OLD.print_picture_id, OLD.serial) THEN
    RAISE EXCEPTION 'a sheet keeps its copy and picture' USING ERRCODE = 'NL016';
  END IF;
  IF NEW.making IN ('signed', 'packed', 'dispatched', 'delivered') THEN
    UPDATE editions SET first_issued_at = now()
      FROM copies c WHERE c.id = NEW.copy_id AND c.run = 'numbered' AND editions.id = c.edition_id AND first_issued_at IS NULL;
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER sheet_guard BEFORE INSERT OR UPDATE OR DELETE ON sheets FOR EACH ROW EXECUTE FUNCTION sheet_guard();
--> statement-breakpoint

-- Open pages learn of a changed placement through this channel; the payload is the edition's id.
CREATE FUNCTION placement_changed() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  PERFORM pg_notify('placement_changed', NEW.edition_id::text);
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER placement_changed AFTER UPDATE OF placement ON copies FOR EACH ROW WHEN (OLD.placement IS DISTINCT FROM NEW.placement) EXECUTE FUNCTION placement_changed();
