-- Takes what batches of events add to walks: moves each walk's row on, or makes it, and appends the events. An addition takes effect, all of it, only
-- while its log still ends where the events were judged (0: there is no such walk) and none of the ids was set aside before; else it does nothing.
-- Gives the walks whose addition took effect. A function, because the plans of its statements are then made once for a connection and not with
-- every tap at the bench. The callers send additions in the order of their walks, so that two of them never wait for each other.
CREATE FUNCTION append_walk_events(additions jsonb) RETURNS SETOF uuid LANGUAGE plpgsql AS $$
DECLARE
  a record;
  title text;
BEGIN
  FOR a IN
    SELECT * FROM jsonb_to_recordset(additions) AS given (
      walk_id uuid, judged_at int, kind text, chart_id text, chart_title text, version int, started_by uuid, machine jsonb, machine_words text, phase text,
      is_paused boolean, is_open boolean, stands_at text, minutes_used double precision, cause_id text, cause_title text, has_question boolean,
      holder_person_id uuid, holder_device_id uuid, last_seq int, received_at timestamptz, new_people jsonb, events jsonb
    )
  LOOP
    CONTINUE WHEN EXISTS (
      SELECT FROM walk_side_events WHERE id IN (SELECT (e -> 'event' ->> 'id')::uuid FROM jsonb_array_elements(a.events) e)
    );
    -- The machine is named anew only where an event has named it.
    IF a.machine IS NOT NULL THEN
      title := coalesce((SELECT maker || ' ' || name FROM models WHERE id = a.machine ->> 'modelId'), a.machine_words);
    END IF;
    IF a.judged_at = 0 THEN
      INSERT INTO walks (
        id, kind, chart_id, chart_title, version, machine, machine_title, phase, is_paused, is_open, stands_at, minutes_used, cause_id, cause_title,
        has_question, started_by, holder_person_id, holder_device_id, started_at, last_event_at, last_seq
      ) VALUES (
        a.walk_id, a.kind, a.chart_id, a.chart_title, a.version, a.machine, title, a.phase, a.is_paused, a.is_open, a.stands_at, a.minutes_used, a.cause_id,
        a.cause_title, a.has_question, a.started_by, a.holder_person_id, a.holder_device_id, a.received_at, a.received_at, a.last_seq
      ) ON CONFLICT (id) DO NOTHING;
    ELSE
      UPDATE walks SET
        phase = a.phase, is_paused = a.is_paused, is_open = a.is_open, stands_at = a.stands_at, minutes_used = a.minutes_used, cause_id = a.cause_id,
        cause_title = a.cause_title, has_question = a.has_question, holder_person_id = a.holder_person_id, holder_device_id = a.holder_device_id,
        machine = coalesce(a.machine, machine), machine_title = CASE WHEN a.machine IS NULL THEN machine_title ELSE title END,
        last_event_at = a.received_at, last_seq = a.last_seq
      WHERE id = a.walk_id AND last_seq = a.judged_at;
    END IF;
    CONTINUE WHEN NOT FOUND;
    IF a.new_people IS NOT NULL THEN
      INSERT INTO walk_people (walk_id, person_id) SELECT a.walk_id, p::uuid FROM jsonb_array_elements_text(a.new_people) p ON CONFLICT DO NOTHING;
    END IF;
    INSERT INTO walk_events (id, walk_id, seq, type, person_id, device_id, event, body_hash, received_at)
    SELECT (e -> 'event' ->> 'id')::uuid, a.walk_id, (e -> 'event' ->> 'seq')::int, e -> 'event' ->> 'type', (e -> 'event' ->> 'personId')::uuid,
      (e -> 'event' ->> 'deviceId')::uuid, e -> 'event', e ->> 'body_hash', a.received_at
    FROM jsonb_array_elements(a.events) e;
    RETURN NEXT a.walk_id;
  END LOOP;
END
$$;
