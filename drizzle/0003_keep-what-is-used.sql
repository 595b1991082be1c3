-- A reception log or picture that a revision names stays. Checked when the transaction ends: a whole team can go at once.
ALTER TABLE revision_logs ALTER CONSTRAINT revision_logs_keep_log DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
ALTER TABLE revision_pictures ALTER CONSTRAINT revision_pictures_keep_picture DEFERRABLE INITIALLY DEFERRED;
--> statement-breakpoint
-- What a revision names is read from the revision itself, so that no code can forget to say it. The lock lets nobody
-- delete what is being named.
CREATE FUNCTION note_what_is_named() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  team uuid := (SELECT team_id FROM scenarios WHERE id = NEW.scenario_id);
  log uuid := NEW.scenario #>> '{losses,process,log,id}';
  picture uuid := NEW.scenario #>> '{floor,picture,id}';
BEGIN
  IF log IS NOT NULL THEN
    PERFORM FROM reception_logs WHERE id = log AND team_id = team FOR KEY SHARE;
    IF NOT FOUND THEN
      RAISE EXCEPTION 'Reception log % is not of this team.', log USING ERRCODE = 'foreign_key_violation';
    END IF;
    INSERT INTO revision_logs (scenario_id, revision, log_id) VALUES (NEW.scenario_id, NEW.number, log);
  END IF;
  IF picture IS NOT NULL THEN
    PERFORM FROM floor_pictures WHERE id = picture AND team_id = team FOR KEY SHARE;
    IF NOT FOUND THEN
      RAISE EXCEPTION 'Picture % is not of this team.', picture USING ERRCODE = 'foreign_key_violation';
    END IF;
    INSERT INTO revision_pictures (scenario_id, revision, picture_id) VALUES (NEW.scenario_id, NEW.number, picture);
  END IF;
  RETURN NULL;
END;
$$;
--> statement-breakpoint
CREATE TRIGGER revisions_name_what_they_use AFTER INSERT ON revisions FOR EACH ROW EXECUTE FUNCTION note_what_is_named();
--> statement-breakpoint
CREATE TRIGGER revision_logs_never_change BEFORE UPDATE ON revision_logs FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER revision_pictures_never_change BEFORE UPDATE ON revision_pictures FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER revision_logs_stay BEFORE DELETE ON revision_logs FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('scenarios', 'scenario_id');
--> statement-breakpoint
CREATE TRIGGER revision_pictures_stay BEFORE DELETE ON revision_pictures FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('scenarios', 'scenario_id');
--> statement-breakpoint
-- What was received is evidence. Only the name of a log is free, with what is searched and sorted by.
CREATE TRIGGER reception_logs_change_in_name_only BEFORE UPDATE OF
  id, team_id, author_id, file_name, bytes, sha256, mapping, reading_key, rows, rows_used, troubles, links, packets, lost, uploaded_at
  ON reception_logs FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER log_readings_never_change BEFORE UPDATE ON log_readings FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER log_pieces_never_change BEFORE UPDATE ON log_pieces FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER floor_pictures_never_change BEFORE UPDATE ON floor_pictures FOR EACH ROW EXECUTE FUNCTION refuse_update();
--> statement-breakpoint
CREATE TRIGGER log_readings_stay BEFORE DELETE ON log_readings FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('reception_logs', 'log_id');
--> statement-breakpoint
CREATE TRIGGER log_pieces_stay BEFORE DELETE ON log_pieces FOR EACH ROW EXECUTE FUNCTION refuse_delete_of_kept('reception_logs', 'log_id');
