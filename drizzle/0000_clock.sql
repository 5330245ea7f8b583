-- The one clock of the record: every time that is stored comes from here, never from a client or from Node.
-- clock_offset (next migration) shifts it only while the demo is filled. plpgsql binds the table late.
CREATE FUNCTION motebook_now() RETURNS timestamptz
LANGUAGE plpgsql VOLATILE SECURITY DEFINER SET search_path = public, pg_temp AS $$
BEGIN
  RETURN clock_timestamp() + coalesce((SELECT shift FROM clock_offset), interval '0');
END $$;
