CREATE TABLE "frozen_sentences" (
	"hash" text PRIMARY KEY NOT NULL,
	"sentences" jsonb NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "frozen_sentences_hash_shape" CHECK ("frozen_sentences"."hash" ~ '^[0-9a-f]{64}$')
);
