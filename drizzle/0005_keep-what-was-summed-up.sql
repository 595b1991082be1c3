-- What is summed up of a log does not change either.
DROP TRIGGER reception_logs_change_in_name_only ON reception_logs;
--> statement-breakpoint
CREATE TRIGGER reception_logs_change_in_name_only BEFORE UPDATE OF
  id, team_id, author_id, file_name, bytes, sha256, mapping, reading_key, rows, rows_used, troubles, links, packets, lost, interval_s, verdicts, uploaded_at
  ON reception_logs FOR EACH ROW EXECUTE FUNCTION refuse_update();
