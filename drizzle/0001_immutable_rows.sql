-- Rows that never change, whoever asks: revisions, blocks and audit events are written once; a run changes only in its audit and bin columns.
CREATE FUNCTION moorage_refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'Rows of % are immutable.', TG_TABLE_NAME USING ERRCODE = 'restrict_violation';
END $$;
--> statement-breakpoint
CREATE FUNCTION moorage_guard_run() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  open_columns text[] := ARRAY['audit_state', 'audit_blocks', 'audit_detection', 'audit_at', 'deleted_at', 'deleted_by'];
BEGIN
  IF to_jsonb(NEW) - open_columns IS DISTINCT FROM to_jsonb(OLD) - open_columns THEN
    RAISE EXCEPTION 'A saved run changes only in its audit and bin columns.' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER scenario_revisions_immutable BEFORE UPDATE OR DELETE ON scenario_revisions FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER scenario_revisions_kept BEFORE TRUNCATE ON scenario_revisions FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER run_blocks_immutable BEFORE UPDATE OR DELETE ON run_blocks FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER run_blocks_kept BEFORE TRUNCATE ON run_blocks FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_events_immutable BEFORE UPDATE OR DELETE ON audit_events FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER audit_events_kept BEFORE TRUNCATE ON audit_events FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER runs_guarded BEFORE UPDATE ON runs FOR EACH ROW EXECUTE FUNCTION moorage_guard_run();
--> statement-breakpoint
CREATE TRIGGER runs_not_deleted BEFORE DELETE ON runs FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER runs_kept BEFORE TRUNCATE ON runs FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
