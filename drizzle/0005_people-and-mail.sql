CREATE TYPE "public"."link_kind" AS ENUM('invitation', 'reset');--> statement-breakpoint
CREATE TABLE "mail" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"kind" text NOT NULL,
	"person_id" uuid,
	"address" text,
	"details" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"queued_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"handed_at" timestamp with time zone,
	"sent_at" timestamp with time zone,
	"dropped_at" timestamp with time zone,
	"tries" integer DEFAULT 0 NOT NULL,
	"last_fault" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "password_link" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"person_id" uuid NOT NULL,
	"kind" "link_kind" NOT NULL,
	"secret_hash" "bytea" NOT NULL,
	"made_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"ended_at" timestamp with time zone,
	CONSTRAINT "password_link_secret_hash_unique" UNIQUE("secret_hash")
);
--> statement-breakpoint
CREATE TABLE "attempt" (
	"kind" text NOT NULL,
	"key" "bytea" NOT NULL,
	"started_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"count" integer NOT NULL,
	CONSTRAINT "attempt_kind_key_pk" PRIMARY KEY("kind","key")
);
--> statement-breakpoint
ALTER TABLE "person" ALTER COLUMN "password_hash" DROP NOT NULL;--> statement-breakpoint
ALTER TABLE "mail" ADD CONSTRAINT "mail_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "password_link" ADD CONSTRAINT "password_link_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "mail_not_handed" ON "mail" USING btree ("queued_at") WHERE "mail"."handed_at" IS NULL;--> statement-breakpoint
CREATE INDEX "mail_by_person" ON "mail" USING btree ("person_id","queued_at");--> statement-breakpoint
CREATE INDEX "password_link_by_person" ON "password_link" USING btree ("person_id");
--> statement-breakpoint

-- The queue that mail waits in: what pg-boss 10.4.2 (its schema 24) would make by itself, made here by the owner, because
-- the role that sends may not make tables. A newer pg-boss brings its own plans, for a migration of their own.
CREATE SCHEMA IF NOT EXISTS queue
  ;

    CREATE TYPE queue.job_state AS ENUM (
      'created',
      'retry',
      'active',
      'completed',
      'cancelled',
      'failed'
    )
  ;

    CREATE TABLE queue.version (
      version int primary key,
      maintained_on timestamp with time zone,
      cron_on timestamp with time zone,
      monitored_on timestamp with time zone
    )
  ;

    CREATE TABLE queue.queue (
      name text,
      policy text,
      retry_limit int,
      retry_delay int,
      retry_backoff bool,
      expire_seconds int,
      retention_minutes int,
      dead_letter text REFERENCES queue.queue (name),
      partition_name text,
      created_on timestamp with time zone not null default now(),
      updated_on timestamp with time zone not null default now(),
      PRIMARY KEY (name)
    )
  ;

    CREATE TABLE queue.schedule (
      name text REFERENCES queue.queue ON DELETE CASCADE,
      cron text not null,
      timezone text,
      data jsonb,
      options jsonb,
      created_on timestamp with time zone not null default now(),
      updated_on timestamp with time zone not null default now(),
      PRIMARY KEY (name)
    )
  ;

    CREATE TABLE queue.subscription (
      event text not null,
      name text not null REFERENCES queue.queue ON DELETE CASCADE,
      created_on timestamp with time zone not null default now(),
      updated_on timestamp with time zone not null default now(),
      PRIMARY KEY(event, name)
    )
  ;

    CREATE TABLE queue.job (
      id uuid not null default gen_random_uuid(),
      name text not null,
      priority integer not null default(0),
      data jsonb,
      state queue.job_state not null default('created'),
      retry_limit integer not null default(2),
      retry_count integer not null default(0),
      retry_delay integer not null default(0),
      retry_backoff boolean not null default false,
      start_after timestamp with time zone not null default now(),
      started_on timestamp with time zone,
      singleton_key text,
      singleton_on timestamp without time zone,
      expire_in interval not null default interval '15 minutes',
      created_on timestamp with time zone not null default now(),
      completed_on timestamp with time zone,
      keep_until timestamp with time zone NOT NULL default now() + interval '14 days',
      output jsonb,
      dead_letter text,
      policy text
    ) PARTITION BY LIST (name)
  ;
ALTER TABLE queue.job ADD PRIMARY KEY (name, id);
CREATE TABLE queue.archive (LIKE queue.job);
ALTER TABLE queue.archive ADD PRIMARY KEY (name, id);
ALTER TABLE queue.archive ADD archived_on timestamptz NOT NULL DEFAULT now();
CREATE INDEX archive_i1 ON queue.archive(archived_on);

    CREATE FUNCTION queue.create_queue(queue_name text, options json)
    RETURNS VOID AS
    $$
    DECLARE
      table_name varchar := 'j' || encode(sha224(queue_name::bytea), 'hex');
      queue_created_on timestamptz;
    BEGIN

      WITH q as (
      INSERT INTO queue.queue (
        name,
        policy,
        retry_limit,
        retry_delay,
        retry_backoff,
        expire_seconds,
        retention_minutes,
        dead_letter,
        partition_name
      )
      VALUES (
        queue_name,
        options->>'policy',
        (options->>'retryLimit')::int,
        (options->>'retryDelay')::int,
        (options->>'retryBackoff')::bool,
        (options->>'expireInSeconds')::int,
        (options->>'retentionMinutes')::int,
        options->>'deadLetter',
        table_name
      )
      ON CONFLICT DO NOTHING
      RETURNING created_on
      )
      SELECT created_on into queue_created_on from q;

      IF queue_created_on IS NULL THEN
        RETURN;
      END IF;

      EXECUTE format('CREATE TABLE queue.%I (LIKE queue.job INCLUDING DEFAULTS)', table_name);

      EXECUTE format('ALTER TABLE queue.%1$I ADD PRIMARY KEY (name, id)', table_name);
      EXECUTE format('ALTER TABLE queue.%1$I ADD CONSTRAINT q_fkey FOREIGN KEY (name) REFERENCES queue.queue (name) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED', table_name);
      EXECUTE format('ALTER TABLE queue.%1$I ADD CONSTRAINT dlq_fkey FOREIGN KEY (dead_letter) REFERENCES queue.queue (name) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED', table_name);
      EXECUTE format('CREATE UNIQUE INDEX %1$s_i1 ON queue.%1$I (name, COALESCE(singleton_key, '''')) WHERE state = ''created'' AND policy = ''short''', table_name);
      EXECUTE format('CREATE UNIQUE INDEX %1$s_i2 ON queue.%1$I (name, COALESCE(singleton_key, '''')) WHERE state = ''active'' AND policy = ''singleton''', table_name);
      EXECUTE format('CREATE UNIQUE INDEX %1$s_i3 ON queue.%1$I (name, state, COALESCE(singleton_key, '''')) WHERE state <= ''active'' AND policy = ''stately''', table_name);
      EXECUTE format('CREATE UNIQUE INDEX %1$s_i4 ON queue.%1$I (name, singleton_on, COALESCE(singleton_key, '''')) WHERE state <> ''cancelled'' AND singleton_on IS NOT NULL', table_name);
      EXECUTE format('CREATE INDEX %1$s_i5 ON queue.%1$I (name, start_after) INCLUDE (priority, created_on, id) WHERE state < ''active''', table_name);

      EXECUTE format('ALTER TABLE queue.%I ADD CONSTRAINT cjc CHECK (name=%L)', table_name, queue_name);
      EXECUTE format('ALTER TABLE queue.job ATTACH PARTITION queue.%I FOR VALUES IN (%L)', table_name, queue_name);
    END;
    $$
    LANGUAGE plpgsql;
  ;

    CREATE FUNCTION queue.delete_queue(queue_name text)
    RETURNS VOID AS
    $$
    DECLARE
      table_name varchar;
    BEGIN
      WITH deleted as (
        DELETE FROM queue.queue
        WHERE name = queue_name
        RETURNING partition_name
      )
      SELECT partition_name from deleted INTO table_name;

      EXECUTE format('DROP TABLE IF EXISTS queue.%I', table_name);
    END;
    $$
    LANGUAGE plpgsql;
  ;
INSERT INTO queue.version(version) VALUES ('24');
--> statement-breakpoint
-- Sixteen tries, the pauses doubling from a few seconds: about four days.
SELECT queue.create_queue('mail', '{"policy":"standard","retryLimit":16,"retryDelay":5,"retryBackoff":true,"expireInSeconds":120,"retentionMinutes":20160}');
--> statement-breakpoint
GRANT USAGE ON SCHEMA queue TO motebook_app;
--> statement-breakpoint
GRANT SELECT, INSERT, UPDATE, DELETE ON ALL TABLES IN SCHEMA queue TO motebook_app;
--> statement-breakpoint

GRANT SELECT ON password_link, mail, attempt TO motebook_app, motebook_backup;
--> statement-breakpoint
GRANT INSERT, UPDATE (ended_at) ON password_link TO motebook_app;
--> statement-breakpoint
GRANT INSERT, UPDATE (person_id, handed_at, sent_at, dropped_at, tries, last_fault) ON mail TO motebook_app;
--> statement-breakpoint
GRANT INSERT, UPDATE, DELETE ON attempt TO motebook_app;
--> statement-breakpoint
-- The mail process hears of new rows at once.
CREATE FUNCTION tell_mail() RETURNS trigger LANGUAGE plpgsql SET search_path = public, pg_temp AS $$
BEGIN
  PERFORM pg_notify('motebook_mail', '');
  RETURN NULL;
END $$;
--> statement-breakpoint
CREATE TRIGGER tell_mail AFTER INSERT ON mail FOR EACH STATEMENT EXECUTE FUNCTION tell_mail();
