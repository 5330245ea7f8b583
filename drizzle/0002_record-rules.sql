-- Rules that the record rests on: insert-only tables, times by the database, one write path for the body, least rights.

-- 1. Insert-only record tables. ENABLE ALWAYS: loading in replica mode cannot skip the triggers.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
BEGIN
  RAISE EXCEPTION 'table % is insert-only: % is refused', TG_TABLE_NAME, TG_OP USING ERRCODE = 'MB001';
END $$;
--> statement-breakpoint
CREATE FUNCTION stamp_time() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
BEGIN
  NEW.at := motebook_now();
  RETURN NEW;
END $$;
--> statement-breakpoint
DO $$
DECLARE record_table text;
BEGIN
  FOREACH record_table IN ARRAY ARRAY['entry_update', 'attachment', 'reading', 'result', 'audit'] LOOP
    EXECUTE format('CREATE TRIGGER insert_only BEFORE UPDATE OR DELETE ON %I FOR EACH ROW EXECUTE FUNCTION refuse_change()', record_table);
    EXECUTE format('CREATE TRIGGER never_truncated BEFORE TRUNCATE ON %I FOR EACH STATEMENT EXECUTE FUNCTION refuse_change()', record_table);
    EXECUTE format('CREATE TRIGGER time_by_database BEFORE INSERT ON %I FOR EACH ROW EXECUTE FUNCTION stamp_time()', record_table);
    EXECUTE format('ALTER TABLE %I ENABLE ALWAYS TRIGGER insert_only', record_table);
    EXECUTE format('ALTER TABLE %I ENABLE ALWAYS TRIGGER never_truncated', record_table);
    EXECUTE format('ALTER TABLE %I ENABLE ALWAYS TRIGGER time_by_database', record_table);
  END LOOP;
END $$;
--> statement-breakpoint

-- 2. The hash chain of an entry's updates (integrity rule 2.4). Lengths are part of what is hashed.
CREATE FUNCTION update_chain(previous bytea, entry text, seq bigint, epoch bigint, person text, micros bigint, payload bytea)
RETURNS bytea LANGUAGE sql IMMUTABLE PARALLEL SAFE SET search_path = public, pg_temp AS $$
  SELECT sha256(
    '\x6d6f7465626f6f6b2f636861696e2f3100'::bytea  -- "motebook/chain/1" and a zero byte
    || previous
    || int2send(octet_length(convert_to(entry, 'UTF8'))::int2) || convert_to(entry, 'UTF8')
    || int8send(seq) || int8send(epoch)
    || int2send(octet_length(convert_to(person, 'UTF8'))::int2) || convert_to(person, 'UTF8')
    || int8send(micros)
    || sha256(payload))
$$;
--> statement-breakpoint

-- 3. The one write path of the body (integrity rule C14). It locks the entry, checks state, lock, epoch and right,
--    numbers and chains the payloads, inserts them and announces the new head. It refuses with a code instead of an
--    error, so that one refused entry never fails the batch of others.
CREATE FUNCTION append_updates(
  p_entry uuid, p_lock integer, p_epoch integer, p_person uuid, p_login uuid, p_batch uuid,
  p_clients bigint[], p_payloads bytea[])
RETURNS TABLE (refusal text, ordinal integer, seq bigint, chain bytea, at timestamptz)
LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
DECLARE
  head entry%ROWTYPE;
  new_seq bigint;
  new_chain bytea;
  added bigint;
  moment timestamptz;
  already boolean;
BEGIN
  IF p_clients IS NULL OR p_payloads IS NULL OR cardinality(p_clients) <> cardinality(p_payloads) THEN
    RAISE EXCEPTION 'append_updates wants one client id for each payload';
  END IF;
  SELECT * INTO head FROM entry WHERE id = p_entry FOR UPDATE;
  IF NOT FOUND THEN
    RETURN QUERY SELECT 'unknown', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;

  -- The same batch again: its COMMIT went through but the answer was lost. Say what was stored, store nothing.
  SELECT EXISTS (SELECT 1 FROM entry_update u WHERE u.entry_id = p_entry AND u.batch = p_batch) INTO already;
  IF already THEN
    RETURN QUERY SELECT NULL::text, u.ordinal, u.seq, u.chain, u.at FROM entry_update u
      WHERE u.entry_id = p_entry AND u.batch = p_batch ORDER BY u.ordinal;
    RETURN;
  END IF;

  IF head.state <> 'draft' OR head.lock <> p_lock THEN
    RETURN QUERY SELECT 'locked', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;
  IF head.epoch <> p_epoch THEN
    RETURN QUERY SELECT 'epoch', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;
  IF NOT EXISTS (
    SELECT 1 FROM person p JOIN notebook_member m ON m.person_id = p.id AND m.notebook_id = head.notebook_id
      JOIN notebook n ON n.id = m.notebook_id AND n.archived_at IS NULL
    WHERE p.id = p_person AND p.active AND p.role <> 'guest' AND m.role IN ('owner', 'editor'))
  OR (p_login IS NOT NULL AND NOT EXISTS (
    SELECT 1 FROM login l WHERE l.id = p_login AND l.person_id = p_person AND l.ended_at IS NULL)) THEN
    RETURN QUERY SELECT 'forbidden', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;
  IF EXISTS (
    SELECT 1 FROM unnest(p_clients) AS given(client)
    WHERE NOT EXISTS (SELECT 1 FROM entry_client c WHERE c.entry_id = p_entry AND c.epoch = p_epoch
                        AND c.client = given.client AND c.person_id = p_person)) THEN
    RETURN QUERY SELECT 'foreign-id', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;
  SELECT coalesce(sum(octet_length(payload)), 0) INTO added FROM unnest(p_payloads) AS payload;
  IF head.bytes + added > 16 * 1024 * 1024 THEN
    RETURN QUERY SELECT 'full', NULL::integer, NULL::bigint, NULL::bytea, NULL::timestamptz; RETURN;
  END IF;

  new_seq := head.head_seq;
  new_chain := head.head_chain;
  FOR i IN 1 .. cardinality(p_payloads) LOOP
    new_seq := new_seq + 1;
    -- The trigger that stamps the row is the authority on its time, so the chain is computed from the stored time.
    INSERT INTO entry_update (entry_id, epoch, seq, person_id, login_id, client, batch, ordinal, payload, chain)
      VALUES (p_entry, p_epoch, new_seq, p_person, p_login, p_clients[i], p_batch, i, p_payloads[i], new_chain)
      RETURNING entry_update.at, entry_update.chain INTO moment, new_chain;
    RETURN QUERY SELECT NULL::text, i, new_seq, new_chain, moment;
  END LOOP;
  UPDATE entry SET head_seq = new_seq, head_chain = new_chain, bytes = bytes + added, edited_at = motebook_now()
    WHERE id = p_entry;
  PERFORM pg_notify('motebook_update', json_build_object('entry', p_entry, 'seq', new_seq)::text);
END $$;
--> statement-breakpoint
-- Runs after time_by_database (triggers fire in name order): turns the previous head, handed in as `chain`, into this row's.
CREATE FUNCTION chain_update() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
BEGIN
  NEW.chain := update_chain(NEW.chain, NEW.entry_id::text, NEW.seq, NEW.epoch, NEW.person_id::text,
    (extract(epoch FROM NEW.at) * 1000000)::bigint, NEW.payload);
  RETURN NEW;
END $$;
--> statement-breakpoint
CREATE TRIGGER x_chain BEFORE INSERT ON entry_update FOR EACH ROW EXECUTE FUNCTION chain_update();
--> statement-breakpoint
ALTER TABLE entry_update ENABLE ALWAYS TRIGGER x_chain;
--> statement-breakpoint

-- 4. Claims a Yjs client id for an account; 'foreign-id' when somebody else has it.
CREATE FUNCTION register_client(p_entry uuid, p_epoch integer, p_client bigint, p_person uuid)
RETURNS text LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
DECLARE holder uuid;
BEGIN
  INSERT INTO entry_client (entry_id, epoch, client, person_id) VALUES (p_entry, p_epoch, p_client, p_person)
    ON CONFLICT DO NOTHING;
  SELECT person_id INTO holder FROM entry_client WHERE entry_id = p_entry AND epoch = p_epoch AND client = p_client;
  RETURN CASE WHEN holder = p_person THEN 'ok' ELSE 'foreign-id' END;
END $$;
--> statement-breakpoint

-- 5. Keeps a replayed state beside the log; only the newest two stay. The log itself is never shortened.
CREATE FUNCTION save_snapshot(p_entry uuid, p_epoch integer, p_seq bigint, p_state bytea)
RETURNS void LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  IF NOT EXISTS (SELECT 1 FROM entry_update WHERE entry_id = p_entry AND epoch = p_epoch AND seq = p_seq) THEN
    RAISE EXCEPTION 'no update % in entry %', p_seq, p_entry;
  END IF;
  INSERT INTO entry_snapshot (entry_id, epoch, seq, state) VALUES (p_entry, p_epoch, p_seq, p_state)
    ON CONFLICT DO NOTHING;
  DELETE FROM entry_snapshot s WHERE s.entry_id = p_entry AND s.epoch = p_epoch AND s.seq NOT IN (
    SELECT k.seq FROM entry_snapshot k WHERE k.entry_id = p_entry AND k.epoch = p_epoch ORDER BY k.seq DESC LIMIT 2);
END $$;
--> statement-breakpoint

-- 6. When somebody's rights or login change, the websocket servers ask again at once.
CREATE FUNCTION tell_access() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
DECLARE who uuid;
BEGIN
  IF TG_TABLE_NAME = 'person' THEN who := NEW.id;
  ELSIF TG_TABLE_NAME = 'login' THEN who := NEW.person_id;
  ELSIF TG_OP = 'DELETE' THEN who := OLD.person_id;
  ELSE who := NEW.person_id;
  END IF;
  PERFORM pg_notify('motebook_access', who::text);
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER tell_access AFTER UPDATE OF role, active ON person FOR EACH ROW EXECUTE FUNCTION tell_access();
--> statement-breakpoint
CREATE TRIGGER tell_access AFTER UPDATE OF ended_at ON login FOR EACH ROW EXECUTE FUNCTION tell_access();
--> statement-breakpoint
CREATE TRIGGER tell_access AFTER INSERT OR UPDATE OR DELETE ON notebook_member FOR EACH ROW EXECUTE FUNCTION tell_access();
--> statement-breakpoint
-- Title, date or state of an entry changed: open pages read them again.
CREATE FUNCTION tell_entry() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
BEGIN
  PERFORM pg_notify('motebook_entry', NEW.id::text);
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER tell_entry AFTER UPDATE OF title, experiment_date, state, lock, epoch ON entry FOR EACH ROW EXECUTE FUNCTION tell_entry();
--> statement-breakpoint

-- 7. Least rights. The roles are made with the cluster (db/setup/roles.ts): owner owns and migrates, app serves pages and
--    projects, ws holds EXECUTE on the write path and SELECT, read reads, backup reads everything for a dump.
REVOKE ALL ON SCHEMA public FROM PUBLIC;
--> statement-breakpoint
REVOKE EXECUTE ON ALL FUNCTIONS IN SCHEMA public FROM PUBLIC;
--> statement-breakpoint
-- Later migrations grant each function by name, too.
ALTER DEFAULT PRIVILEGES REVOKE EXECUTE ON FUNCTIONS FROM PUBLIC;
--> statement-breakpoint
GRANT USAGE ON SCHEMA public TO motebook_app, motebook_ws, motebook_read, motebook_backup;
--> statement-breakpoint
GRANT SELECT ON ALL TABLES IN SCHEMA public TO motebook_app, motebook_backup;
--> statement-breakpoint
-- Neither the websocket server nor a reader of statistics ever needs a password hash.
GRANT SELECT ON lab, notebook, notebook_member, entry, entry_update, entry_client, entry_snapshot, entry_text, attachment, reading, result, block_result TO motebook_ws, motebook_read;
--> statement-breakpoint
GRANT SELECT (id, login, email, name, role, admin, active, created_at) ON person TO motebook_ws, motebook_read;
--> statement-breakpoint
GRANT SELECT ON login TO motebook_ws;
--> statement-breakpoint
GRANT SELECT ON audit TO motebook_read;
--> statement-breakpoint
GRANT EXECUTE ON FUNCTION motebook_now() TO motebook_app, motebook_ws, motebook_read;
--> statement-breakpoint
GRANT EXECUTE ON FUNCTION update_chain(bytea, text, bigint, bigint, text, bigint, bytea) TO motebook_app, motebook_ws, motebook_read;
--> statement-breakpoint
GRANT EXECUTE ON FUNCTION append_updates(uuid, integer, integer, uuid, uuid, uuid, bigint[], bytea[]) TO motebook_app, motebook_ws;
--> statement-breakpoint
GRANT EXECUTE ON FUNCTION register_client(uuid, integer, bigint, uuid) TO motebook_app, motebook_ws;
--> statement-breakpoint
GRANT EXECUTE ON FUNCTION save_snapshot(uuid, integer, bigint, bytea) TO motebook_app;
--> statement-breakpoint
GRANT INSERT, UPDATE ON lab, notebook, upload_ticket, entry_text TO motebook_app;
--> statement-breakpoint
-- A login name never changes, and a login never passes to another person (integrity rule R8).
GRANT INSERT, UPDATE (email, name, role, admin, active, password_hash) ON person TO motebook_app;
--> statement-breakpoint
GRANT INSERT, UPDATE (seen_at, ended_at) ON login TO motebook_app;
--> statement-breakpoint
GRANT INSERT, UPDATE, DELETE ON notebook_member, block_result TO motebook_app;
--> statement-breakpoint
GRANT INSERT (id, notebook_id, number, title, experiment_date, created_by) ON entry TO motebook_app;
--> statement-breakpoint
-- head_seq, head_chain, bytes and epoch move only inside append_updates.
GRANT UPDATE (title, experiment_date) ON entry TO motebook_app;
--> statement-breakpoint
GRANT INSERT ON attachment, reading, result, audit TO motebook_app;
