CREATE TABLE "places" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"name" text NOT NULL,
	"region_id" uuid NOT NULL,
	"latitude" double precision NOT NULL,
	"longitude" double precision NOT NULL,
	"season_rain_mm" double precision NOT NULL,
	"heat_sum_degree_days" double precision NOT NULL,
	"soil_texture" text NOT NULL,
	CONSTRAINT "places_name_unique" UNIQUE("region_id","name"),
	CONSTRAINT "places_latitude_range" CHECK ("places"."latitude" between -90 and 90),
	CONSTRAINT "places_longitude_range" CHECK ("places"."longitude" between -180 and 180)
);
--> statement-breakpoint
CREATE TABLE "outbox_mails" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"grower_copy_id" uuid,
	"recipient" text NOT NULL,
	"language" text NOT NULL,
	"content" jsonb NOT NULL,
	"state" text DEFAULT 'waiting' NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"next_attempt_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_error" text,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	CONSTRAINT "outbox_mails_state" CHECK ("outbox_mails"."state" in ('waiting', 'sending', 'sent', 'failed')),
	CONSTRAINT "outbox_mails_language" CHECK ("outbox_mails"."language" in ('en', 'fr'))
);
--> statement-breakpoint
CREATE TABLE "usual_variances" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"crop_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"site" double precision NOT NULL,
	"season" double precision NOT NULL,
	"rest" double precision NOT NULL,
	"site_se" double precision,
	"season_se" double precision,
	"rest_se" double precision,
	"environments" integer NOT NULL,
	"seasons" integer NOT NULL,
	"entries" integer NOT NULL,
	"engine_version" text NOT NULL,
	"estimated_at" timestamp with time zone DEFAULT now() NOT NULL,
	"estimated_by" uuid,
	CONSTRAINT "usual_variances_positive" CHECK ("usual_variances"."site" >= 0 and "usual_variances"."season" >= 0 and "usual_variances"."rest" >= 0)
);
--> statement-breakpoint
CREATE TABLE "stored_answers" (
	"key" text PRIMARY KEY NOT NULL,
	"answer" jsonb NOT NULL,
	"engine_version" text NOT NULL,
	"computed_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_used_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "stored_answers_key_shape" CHECK ("stored_answers"."key" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "weigh_up_drafts" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"content" jsonb NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "seed_price_per_kg" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "thousand_kernel_weight_g" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "germination_percent" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "mortality_percent" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "target_plants_m2" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "question" text DEFAULT 'several' NOT NULL;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "farm_latitude" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "farm_longitude" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "farm_season_rain_mm" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "farm_heat_sum_degree_days" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "farm_soil_texture" text;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "usual_yield" double precision;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "trial_choice" text DEFAULT 'region' NOT NULL;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "include_neighbours" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "ticked_off" jsonb DEFAULT '[]'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "decision" jsonb;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD COLUMN "archived_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "places" ADD CONSTRAINT "places_region_id_regions_id_fk" FOREIGN KEY ("region_id") REFERENCES "public"."regions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "outbox_mails" ADD CONSTRAINT "outbox_mails_grower_copy_id_grower_copies_id_fk" FOREIGN KEY ("grower_copy_id") REFERENCES "public"."grower_copies"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "outbox_mails" ADD CONSTRAINT "outbox_mails_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "usual_variances" ADD CONSTRAINT "usual_variances_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "usual_variances" ADD CONSTRAINT "usual_variances_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "usual_variances" ADD CONSTRAINT "usual_variances_estimated_by_users_id_fk" FOREIGN KEY ("estimated_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_up_drafts" ADD CONSTRAINT "weigh_up_drafts_owner_id_users_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "outbox_mails_due_idx" ON "outbox_mails" USING btree ("state","next_attempt_at");--> statement-breakpoint
CREATE INDEX "usual_variances_newest_idx" ON "usual_variances" USING btree ("trait_id","estimated_at");--> statement-breakpoint
CREATE INDEX "stored_answers_last_used_idx" ON "stored_answers" USING btree ("last_used_at");--> statement-breakpoint
CREATE INDEX "weigh_up_drafts_owner_idx" ON "weigh_up_drafts" USING btree ("owner_id","updated_at");--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_question" CHECK ("weigh_ups"."question" in ('several', 'pair', 'best'));--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_trial_choice" CHECK ("weigh_ups"."trial_choice" in ('region', 'nearest'));--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_farm_place" CHECK (("weigh_ups"."farm_latitude" is null) = ("weigh_ups"."farm_longitude" is null) and "weigh_ups"."farm_latitude" between -90 and 90 and "weigh_ups"."farm_longitude" between -180 and 180);--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_usual_yield_positive" CHECK ("weigh_ups"."usual_yield" > 0);