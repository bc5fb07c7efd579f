-- Files, fits and versions of weigh-ups are written once; a measured row changes only in whether it counts.
CREATE FUNCTION moorage_guard_point() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF to_jsonb(NEW) - 'aside' IS DISTINCT FROM to_jsonb(OLD) - 'aside' THEN
    RAISE EXCEPTION 'A measured row changes only in whether it is set aside.' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER recording_points_guarded BEFORE UPDATE ON recording_points FOR EACH ROW EXECUTE FUNCTION moorage_guard_point();
--> statement-breakpoint
CREATE TRIGGER recording_points_not_deleted BEFORE DELETE ON recording_points FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER recording_points_kept BEFORE TRUNCATE ON recording_points FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER uploads_immutable BEFORE UPDATE OR DELETE ON uploads FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER uploads_kept BEFORE TRUNCATE ON uploads FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER fits_immutable BEFORE UPDATE OR DELETE ON fits FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER fits_kept BEFORE TRUNCATE ON fits FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER weigh_up_versions_immutable BEFORE UPDATE OR DELETE ON weigh_up_versions FOR EACH ROW EXECUTE FUNCTION moorage_refuse_change();
--> statement-breakpoint
CREATE TRIGGER weigh_up_versions_kept BEFORE TRUNCATE ON weigh_up_versions FOR EACH STATEMENT EXECUTE FUNCTION moorage_refuse_change();
