-- A published version and an event of a walk are facts: the database itself refuses to change or remove one.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  RAISE EXCEPTION 'rows of % are never changed or removed', TG_TABLE_NAME USING ERRCODE = 'integrity_constraint_violation';
END
$$;--> statement-breakpoint
CREATE TRIGGER chart_versions_immutable BEFORE UPDATE OR DELETE ON chart_versions FOR EACH ROW EXECUTE FUNCTION refuse_change();--> statement-breakpoint
CREATE TRIGGER walk_events_append_only BEFORE UPDATE OR DELETE ON walk_events FOR EACH ROW EXECUTE FUNCTION refuse_change();
