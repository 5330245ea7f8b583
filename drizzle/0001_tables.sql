CREATE TYPE "public"."person_role" AS ENUM('pi', 'researcher', 'guest');--> statement-breakpoint
CREATE TYPE "public"."member_role" AS ENUM('owner', 'editor', 'reader', 'witness');--> statement-breakpoint
CREATE TYPE "public"."entry_state" AS ENUM('draft', 'closing', 'signed', 'countersigned', 'void');--> statement-breakpoint
CREATE TYPE "public"."block_status" AS ENUM('empty', 'waiting', 'done', 'failed');--> statement-breakpoint
CREATE TYPE "public"."verdict" AS ENUM('free', 'directed', 'confined', 'anomalous', 'undecided');--> statement-breakpoint
CREATE TABLE "clock_offset" (
	"only" boolean PRIMARY KEY DEFAULT true NOT NULL,
	"shift" interval NOT NULL,
	CONSTRAINT "clock_offset_is_one" CHECK ("clock_offset"."only")
);
--> statement-breakpoint
CREATE TABLE "lab" (
	"id" integer PRIMARY KEY DEFAULT 1 NOT NULL,
	"name" text NOT NULL,
	"time_zone" text NOT NULL,
	CONSTRAINT "lab_is_one" CHECK ("lab"."id" = 1)
);
--> statement-breakpoint
CREATE TABLE "login" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"person_id" uuid NOT NULL,
	"started_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"seen_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"ended_at" timestamp with time zone,
	"user_agent" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
CREATE TABLE "person" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"login" text NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"role" "person_role" NOT NULL,
	"admin" boolean DEFAULT false NOT NULL,
	"active" boolean DEFAULT true NOT NULL,
	"password_hash" text NOT NULL,
	"created_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "person_login_unique" UNIQUE("login"),
	CONSTRAINT "person_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "notebook" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"code" text NOT NULL,
	"title" text NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"last_number" integer DEFAULT 0 NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"archived_at" timestamp with time zone,
	CONSTRAINT "notebook_code_unique" UNIQUE("code")
);
--> statement-breakpoint
CREATE TABLE "notebook_member" (
	"notebook_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"role" "member_role" NOT NULL,
	"since" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "notebook_member_notebook_id_person_id_pk" PRIMARY KEY("notebook_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "entry" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"notebook_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"title" text NOT NULL,
	"experiment_date" date NOT NULL,
	"state" "entry_state" DEFAULT 'draft' NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"epoch" integer DEFAULT 1 NOT NULL,
	"lock" integer DEFAULT 0 NOT NULL,
	"head_seq" bigint DEFAULT 0 NOT NULL,
	"head_chain" "bytea" DEFAULT '\x0000000000000000000000000000000000000000000000000000000000000000'::bytea NOT NULL,
	"bytes" bigint DEFAULT 0 NOT NULL,
	"edited_at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "entry_number" UNIQUE("notebook_id","number"),
	CONSTRAINT "entry_title_length" CHECK (length("entry"."title") <= 300)
);
--> statement-breakpoint
CREATE TABLE "entry_client" (
	"entry_id" uuid NOT NULL,
	"epoch" integer NOT NULL,
	"client" bigint NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "entry_client_entry_id_epoch_client_pk" PRIMARY KEY("entry_id","epoch","client")
);
--> statement-breakpoint
CREATE TABLE "entry_snapshot" (
	"entry_id" uuid NOT NULL,
	"epoch" integer NOT NULL,
	"seq" bigint NOT NULL,
	"state" "bytea" NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "entry_snapshot_entry_id_epoch_seq_pk" PRIMARY KEY("entry_id","epoch","seq")
);
--> statement-breakpoint
CREATE TABLE "entry_update" (
	"entry_id" uuid NOT NULL,
	"epoch" integer NOT NULL,
	"seq" bigint NOT NULL,
	"person_id" uuid NOT NULL,
	"login_id" uuid,
	"client" bigint NOT NULL,
	"batch" uuid NOT NULL,
	"ordinal" integer NOT NULL,
	"payload" "bytea" NOT NULL,
	"chain" "bytea" NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "entry_update_entry_id_epoch_seq_pk" PRIMARY KEY("entry_id","epoch","seq"),
	CONSTRAINT "entry_update_batch" UNIQUE("entry_id","batch","ordinal")
);
--> statement-breakpoint
CREATE TABLE "attachment" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"entry_id" uuid NOT NULL,
	"name" text NOT NULL,
	"media_type" text NOT NULL,
	"bytes" bigint NOT NULL,
	"sha256" text NOT NULL,
	"storage_key" text NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "attachment_storage_key_unique" UNIQUE("storage_key")
);
--> statement-breakpoint
CREATE TABLE "reading" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"attachment_id" uuid NOT NULL,
	"hash" text NOT NULL,
	"spec" jsonb NOT NULL,
	"summary" jsonb NOT NULL,
	"problems" integer DEFAULT 0 NOT NULL,
	"person_id" uuid NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "upload_ticket" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"entry_id" uuid NOT NULL,
	"person_id" uuid NOT NULL,
	"login_id" uuid NOT NULL,
	"name" text NOT NULL,
	"bytes" bigint NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"finished_at" timestamp with time zone
);
--> statement-breakpoint
CREATE TABLE "block_result" (
	"entry_id" uuid NOT NULL,
	"notebook_id" uuid NOT NULL,
	"block_id" text NOT NULL,
	"position" integer NOT NULL,
	"caption" text DEFAULT '' NOT NULL,
	"reading_ids" uuid[] NOT NULL,
	"settings" jsonb NOT NULL,
	"status" "block_status" NOT NULL,
	"message" text DEFAULT '' NOT NULL,
	"address" text,
	"verdict" "verdict",
	"d" double precision,
	"d_lo" double precision,
	"d_hi" double precision,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	CONSTRAINT "block_result_entry_id_block_id_pk" PRIMARY KEY("entry_id","block_id")
);
--> statement-breakpoint
CREATE TABLE "entry_text" (
	"entry_id" uuid PRIMARY KEY NOT NULL,
	"epoch" integer NOT NULL,
	"seq" bigint NOT NULL,
	"plain" text NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "result" (
	"address" text PRIMARY KEY NOT NULL,
	"engine" text NOT NULL,
	"outcome" jsonb NOT NULL,
	"milliseconds" integer NOT NULL,
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "audit_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"at" timestamp with time zone DEFAULT motebook_now() NOT NULL,
	"person_id" uuid,
	"login_id" uuid,
	"kind" text NOT NULL,
	"notebook_id" uuid,
	"entry_id" uuid,
	"subject" text DEFAULT '' NOT NULL,
	"before" jsonb,
	"after" jsonb,
	"reason" text DEFAULT '' NOT NULL
);
--> statement-breakpoint
ALTER TABLE "login" ADD CONSTRAINT "login_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notebook" ADD CONSTRAINT "notebook_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notebook_member" ADD CONSTRAINT "notebook_member_notebook_id_notebook_id_fk" FOREIGN KEY ("notebook_id") REFERENCES "public"."notebook"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "notebook_member" ADD CONSTRAINT "notebook_member_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry" ADD CONSTRAINT "entry_notebook_id_notebook_id_fk" FOREIGN KEY ("notebook_id") REFERENCES "public"."notebook"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry" ADD CONSTRAINT "entry_created_by_person_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_client" ADD CONSTRAINT "entry_client_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_client" ADD CONSTRAINT "entry_client_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_snapshot" ADD CONSTRAINT "entry_snapshot_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_update" ADD CONSTRAINT "entry_update_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_update" ADD CONSTRAINT "entry_update_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_update" ADD CONSTRAINT "entry_update_login_id_login_id_fk" FOREIGN KEY ("login_id") REFERENCES "public"."login"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attachment" ADD CONSTRAINT "attachment_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "attachment" ADD CONSTRAINT "attachment_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reading" ADD CONSTRAINT "reading_attachment_id_attachment_id_fk" FOREIGN KEY ("attachment_id") REFERENCES "public"."attachment"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "reading" ADD CONSTRAINT "reading_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_ticket" ADD CONSTRAINT "upload_ticket_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_ticket" ADD CONSTRAINT "upload_ticket_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "upload_ticket" ADD CONSTRAINT "upload_ticket_login_id_login_id_fk" FOREIGN KEY ("login_id") REFERENCES "public"."login"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "block_result" ADD CONSTRAINT "block_result_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "block_result" ADD CONSTRAINT "block_result_notebook_id_notebook_id_fk" FOREIGN KEY ("notebook_id") REFERENCES "public"."notebook"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "block_result" ADD CONSTRAINT "block_result_address_result_address_fk" FOREIGN KEY ("address") REFERENCES "public"."result"("address") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_text" ADD CONSTRAINT "entry_text_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_login_id_login_id_fk" FOREIGN KEY ("login_id") REFERENCES "public"."login"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_notebook_id_notebook_id_fk" FOREIGN KEY ("notebook_id") REFERENCES "public"."notebook"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit" ADD CONSTRAINT "audit_entry_id_entry_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entry"("id") ON DELETE restrict ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "login_by_person" ON "login" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "member_by_person" ON "notebook_member" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "entry_by_notebook_date" ON "entry" USING btree ("notebook_id","experiment_date");--> statement-breakpoint
CREATE INDEX "attachment_by_entry" ON "attachment" USING btree ("entry_id");--> statement-breakpoint
CREATE INDEX "reading_by_attachment" ON "reading" USING btree ("attachment_id");--> statement-breakpoint
CREATE INDEX "reading_by_hash" ON "reading" USING btree ("hash");--> statement-breakpoint
CREATE INDEX "block_result_by_d" ON "block_result" USING btree ("notebook_id","verdict","d");--> statement-breakpoint
CREATE INDEX "audit_by_entry" ON "audit" USING btree ("entry_id","at");--> statement-breakpoint
CREATE INDEX "audit_by_person" ON "audit" USING btree ("person_id","at");