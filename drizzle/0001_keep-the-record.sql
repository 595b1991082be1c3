-- What is a record stays as it was written: revisions, runs, their series and the activity record are never updated,
-- and go only together with what they belong to.
CREATE FUNCTION refuse_update() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'A row of "%" never changes.', TG_TABLE_NAME USING ERRCODE = 'integrity_constraint_violation';
END;
$$;
--> statement-breakpoint
-- A cascade deletes the owner first, so during a cascade the owner is gone when this runs.
CREATE FUNCTION refuse_delete_of_kept() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  owner_is_there boolean;
BEGIN
  EXECUTE format('SELECT EXISTS (SELECT 1 FROM %I WHERE id = ($1).%I)', TG_ARGV[0], TG_ARGV[1]) INTO owner_is_there USING OLD;
  IF owner_is_there THEN
    RAISE EXCEPTION 'A row of "%" is deleted only together with its "%".', TG_TABLE_NAME, TG_ARGV[0] USING ERRCODE = 'integrity_constraint_violation';
  END IF;
  RETURN OLD;
END;
$$;
--> statement-breakpoint
CREATE TRIGGER revisions_never_change BEFORE UPDATE ON revisions FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER runs_never_change BEFORE UPDATE ON runs FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER run_series_never_change BEFORE UPDATE ON run_series FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER activity_never_changes BEFORE UPDATE ON activity FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER revisions_stay BEFORE DELETE ON revisions FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('scenarios', 'scenario_id');
--> statement-breakpoint
CREATE TRIGGER runs_stay BEFORE DELETE ON runs FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('scenarios', 'scenario_id');
--> statement-breakpoint
CREATE TRIGGER run_series_stay BEFORE DELETE ON run_series FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('runs', 'run_id');
--> statement-breakpoint
CREATE TRIGGER activity_stays BEFORE DELETE ON activity FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('teams', 'team_id');
