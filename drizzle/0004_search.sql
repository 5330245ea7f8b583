-- Words of an entry for the full-text search, kept by the database itself. A vector holds a megabyte at most, so a very long
-- entry is found by its first 400,000 characters; a title by its words and, mistyped, by its likeness.
CREATE SCHEMA trigram;
--> statement-breakpoint
-- In a schema of its own: what may be called in `public` is listed by name.
CREATE EXTENSION pg_trgm SCHEMA trigram;
--> statement-breakpoint
GRANT USAGE ON SCHEMA trigram TO motebook_app, motebook_backup;
--> statement-breakpoint
ALTER TABLE "entry_text" ADD COLUMN "words" tsvector GENERATED ALWAYS AS (to_tsvector('english', left("plain", 400000))) STORED;
--> statement-breakpoint
CREATE INDEX "entry_text_words" ON "entry_text" USING gin ("words");
--> statement-breakpoint
CREATE INDEX "entry_title_words" ON "entry" USING gin (to_tsvector('english', "title"));
--> statement-breakpoint
CREATE INDEX "entry_title_likeness" ON "entry" USING gin (lower("title") trigram.gin_trgm_ops);
