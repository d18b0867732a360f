CREATE TABLE "sessions" (
	"sid" text PRIMARY KEY NOT NULL,
	"sess" json NOT NULL,
	"expire" timestamp (6) NOT NULL
);
--> statement-breakpoint
CREATE TABLE "user_regions" (
	"user_id" uuid NOT NULL,
	"region_id" uuid NOT NULL,
	CONSTRAINT "user_regions_user_id_region_id_pk" PRIMARY KEY("user_id","region_id")
);
--> statement-breakpoint
CREATE TABLE "users" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"password_hash" text NOT NULL,
	"role" text NOT NULL,
	"language" text DEFAULT 'en' NOT NULL,
	"status" text DEFAULT 'active' NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_signed_in_at" timestamp with time zone,
	CONSTRAINT "users_role" CHECK ("users"."role" in ('advisor', 'agronomist', 'administrator')),
	CONSTRAINT "users_language" CHECK ("users"."language" in ('en', 'fr')),
	CONSTRAINT "users_status" CHECK ("users"."status" in ('active', 'suspended'))
);
--> statement-breakpoint
CREATE TABLE "audit_events" (
	"id" bigint PRIMARY KEY GENERATED ALWAYS AS IDENTITY (sequence name "audit_events_id_seq" INCREMENT BY 1 MINVALUE 1 MAXVALUE 9223372036854775807 START WITH 1 CACHE 1),
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"actor_id" uuid,
	"action" text NOT NULL,
	"subject_kind" text NOT NULL,
	"subject_id" text NOT NULL,
	"detail" jsonb DEFAULT '{}'::jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "crops" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slug" text NOT NULL,
	"name_en" text NOT NULL,
	"name_fr" text NOT NULL,
	"eppo_code" text NOT NULL,
	"standard_moisture_percent" double precision NOT NULL,
	"bushel_weight_lb" double precision NOT NULL,
	"cv_limit_percent" double precision NOT NULL,
	"typical_yield" double precision NOT NULL,
	CONSTRAINT "crops_slug_unique" UNIQUE("slug"),
	CONSTRAINT "crops_moisture_range" CHECK ("crops"."standard_moisture_percent" between 0 and 40),
	CONSTRAINT "crops_bushel_positive" CHECK ("crops"."bushel_weight_lb" > 0),
	CONSTRAINT "crops_cv_limit_positive" CHECK ("crops"."cv_limit_percent" > 0),
	CONSTRAINT "crops_typical_yield_positive" CHECK ("crops"."typical_yield" > 0)
);
--> statement-breakpoint
CREATE TABLE "traits" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"crop_id" uuid NOT NULL,
	"slug" text NOT NULL,
	"name_en" text NOT NULL,
	"name_fr" text NOT NULL,
	"unit" text NOT NULL,
	"kind" text NOT NULL,
	"direction" text NOT NULL,
	"practical_margin" double precision,
	"scale_min" double precision,
	"scale_max" double precision,
	"position" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "traits_crop_slug_unique" UNIQUE("crop_id","slug"),
	CONSTRAINT "traits_kind" CHECK ("traits"."kind" in ('numeric', 'ordinal')),
	CONSTRAINT "traits_direction" CHECK ("traits"."direction" in ('higher', 'lower', 'neutral')),
	CONSTRAINT "traits_margin_positive" CHECK ("traits"."practical_margin" is null or "traits"."practical_margin" >= 0),
	CONSTRAINT "traits_scale_order" CHECK ("traits"."scale_min" is null or "traits"."scale_max" is null or "traits"."scale_min" < "traits"."scale_max")
);
--> statement-breakpoint
CREATE TABLE "varieties" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"crop_id" uuid NOT NULL,
	"name" text NOT NULL,
	"aliases" text[] DEFAULT '{}'::text[] NOT NULL,
	"is_check" boolean DEFAULT false NOT NULL,
	"first_season" integer,
	CONSTRAINT "varieties_crop_name_unique" UNIQUE("crop_id","name")
);
--> statement-breakpoint
CREATE TABLE "regions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slug" text NOT NULL,
	"name_en" text NOT NULL,
	"name_fr" text NOT NULL,
	CONSTRAINT "regions_slug_unique" UNIQUE("slug")
);
--> statement-breakpoint
CREATE TABLE "sites" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"slug" text NOT NULL,
	"name" text NOT NULL,
	"region_id" uuid NOT NULL,
	"latitude" double precision NOT NULL,
	"longitude" double precision NOT NULL,
	"elevation_m" double precision NOT NULL,
	"season_rain_mm" double precision NOT NULL,
	"heat_sum_degree_days" double precision NOT NULL,
	"soil_texture" text NOT NULL,
	"soil_ph" double precision NOT NULL,
	CONSTRAINT "sites_slug_unique" UNIQUE("slug"),
	CONSTRAINT "sites_latitude_range" CHECK ("sites"."latitude" between -90 and 90),
	CONSTRAINT "sites_longitude_range" CHECK ("sites"."longitude" between -180 and 180),
	CONSTRAINT "sites_rain_positive" CHECK ("sites"."season_rain_mm" >= 0),
	CONSTRAINT "sites_heat_positive" CHECK ("sites"."heat_sum_degree_days" >= 0),
	CONSTRAINT "sites_ph_range" CHECK ("sites"."soil_ph" between 3 and 11),
	CONSTRAINT "sites_soil_texture" CHECK ("sites"."soil_texture" in ('sand', 'sandy-loam', 'loam', 'silt-loam', 'clay-loam', 'clay'))
);
--> statement-breakpoint
CREATE TABLE "price_sheets" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"crop_id" uuid NOT NULL,
	"region_id" uuid NOT NULL,
	"effective_on" date NOT NULL,
	"currency" text NOT NULL,
	"price_low" double precision NOT NULL,
	"price_middle" double precision NOT NULL,
	"price_high" double precision NOT NULL,
	"haulage_per_tonne" double precision DEFAULT 0 NOT NULL,
	"drying_per_tonne" double precision DEFAULT 0 NOT NULL,
	CONSTRAINT "price_sheets_identity_unique" UNIQUE("crop_id","region_id","effective_on"),
	CONSTRAINT "price_sheets_currency_iso4217" CHECK ("price_sheets"."currency" ~ '^[A-Z]{3}$'),
	CONSTRAINT "price_sheets_order" CHECK ("price_sheets"."price_low" > 0 and "price_sheets"."price_low" <= "price_sheets"."price_middle" and "price_sheets"."price_middle" <= "price_sheets"."price_high"),
	CONSTRAINT "price_sheets_costs_positive" CHECK ("price_sheets"."haulage_per_tonne" >= 0 and "price_sheets"."drying_per_tonne" >= 0)
);
--> statement-breakpoint
CREATE TABLE "seed_costs" (
	"price_sheet_id" uuid NOT NULL,
	"variety_id" uuid NOT NULL,
	"seed_per_hectare" double precision NOT NULL,
	"treatment_per_hectare" double precision DEFAULT 0 NOT NULL,
	"royalty_per_hectare" double precision DEFAULT 0 NOT NULL,
	CONSTRAINT "seed_costs_price_sheet_id_variety_id_pk" PRIMARY KEY("price_sheet_id","variety_id"),
	CONSTRAINT "seed_costs_positive" CHECK ("seed_costs"."seed_per_hectare" >= 0 and "seed_costs"."treatment_per_hectare" >= 0 and "seed_costs"."royalty_per_hectare" >= 0)
);
--> statement-breakpoint
CREATE TABLE "entries" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"trial_id" uuid NOT NULL,
	"label" text NOT NULL,
	"variety_id" uuid,
	"is_check" boolean DEFAULT false NOT NULL,
	CONSTRAINT "entries_trial_label_unique" UNIQUE("trial_id","label")
);
--> statement-breakpoint
CREATE TABLE "entry_means" (
	"version_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"entry_label" text NOT NULL,
	"variety_id" uuid,
	"mean" double precision NOT NULL,
	"variance" double precision,
	"df" double precision,
	"plots_used" integer NOT NULL,
	CONSTRAINT "entry_means_version_id_trait_id_entry_label_pk" PRIMARY KEY("version_id","trait_id","entry_label"),
	CONSTRAINT "entry_means_variance_positive" CHECK ("entry_means"."variance" is null or "entry_means"."variance" >= 0)
);
--> statement-breakpoint
CREATE TABLE "observations" (
	"plot_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"value" double precision NOT NULL,
	CONSTRAINT "observations_plot_id_trait_id_pk" PRIMARY KEY("plot_id","trait_id")
);
--> statement-breakpoint
CREATE TABLE "plots" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"trial_id" uuid NOT NULL,
	"entry_id" uuid NOT NULL,
	"plot_number" text NOT NULL,
	"rep" text,
	"block" text,
	"row" integer,
	"col" integer,
	"main_level" text,
	"factor_levels" jsonb,
	"excluded_reason" text,
	CONSTRAINT "plots_trial_number_unique" UNIQUE("trial_id","plot_number"),
	CONSTRAINT "plots_excluded_reason_said" CHECK ("plots"."excluded_reason" is null or length(trim("plots"."excluded_reason")) > 0)
);
--> statement-breakpoint
CREATE TABLE "summary_errors" (
	"trial_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"lsd" double precision,
	"lsd_alpha" double precision,
	"cv_percent" double precision,
	"standard_error" double precision,
	"residual_ms" double precision,
	"error_df" double precision,
	CONSTRAINT "summary_errors_trial_id_trait_id_pk" PRIMARY KEY("trial_id","trait_id"),
	CONSTRAINT "summary_errors_one_given" CHECK (coalesce("summary_errors"."lsd", "summary_errors"."cv_percent", "summary_errors"."standard_error", "summary_errors"."residual_ms") is not null),
	CONSTRAINT "summary_errors_lsd_has_alpha" CHECK ("summary_errors"."lsd" is null or "summary_errors"."lsd_alpha" is not null)
);
--> statement-breakpoint
CREATE TABLE "summary_means" (
	"entry_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"mean" double precision NOT NULL,
	"replicates" integer NOT NULL,
	CONSTRAINT "summary_means_entry_id_trait_id_pk" PRIMARY KEY("entry_id","trait_id"),
	CONSTRAINT "summary_means_replicates_positive" CHECK ("summary_means"."replicates" > 0)
);
--> statement-breakpoint
CREATE TABLE "trial_versions" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"trial_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"action" text NOT NULL,
	"content" jsonb NOT NULL,
	"sha256" text NOT NULL,
	"author_id" uuid,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"reason" text NOT NULL,
	CONSTRAINT "trial_versions_number_unique" UNIQUE("trial_id","number"),
	CONSTRAINT "trial_versions_number_positive" CHECK ("trial_versions"."number" > 0),
	CONSTRAINT "trial_versions_sha256_shape" CHECK ("trial_versions"."sha256" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "trial_versions_action" CHECK ("trial_versions"."action" in ('publish', 'withdraw')),
	CONSTRAINT "trial_versions_reason_said" CHECK (length(trim("trial_versions"."reason")) > 0)
);
--> statement-breakpoint
CREATE TABLE "trials" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"crop_id" uuid NOT NULL,
	"site_id" uuid NOT NULL,
	"season" integer NOT NULL,
	"name" text NOT NULL,
	"design" text NOT NULL,
	"kind" text NOT NULL,
	"state" text DEFAULT 'draft' NOT NULL,
	"alpha" double precision DEFAULT 0.05 NOT NULL,
	"management" jsonb DEFAULT '{}'::jsonb NOT NULL,
	"sown_on" date,
	"harvested_on" date,
	"created_by" uuid,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	CONSTRAINT "trials_identity_unique" UNIQUE("crop_id","site_id","season","name"),
	CONSTRAINT "trials_season_range" CHECK ("trials"."season" between 1900 and 2200),
	CONSTRAINT "trials_alpha_range" CHECK ("trials"."alpha" > 0 and "trials"."alpha" < 0.5),
	CONSTRAINT "trials_design" CHECK ("trials"."design" in ('crd', 'rcbd', 'latin-square', 'incomplete-blocks', 'row-column', 'split-plot', 'factorial', 'strips')),
	CONSTRAINT "trials_kind" CHECK ("trials"."kind" in ('plots', 'summary')),
	CONSTRAINT "trials_state" CHECK ("trials"."state" in ('draft', 'in-review', 'published', 'withdrawn'))
);
--> statement-breakpoint
CREATE TABLE "version_fits" (
	"version_id" uuid NOT NULL,
	"trait_id" uuid NOT NULL,
	"grand_mean" double precision NOT NULL,
	"residual_ms" double precision,
	"residual_df" double precision,
	"cv_percent" double precision,
	"entry_p" double precision,
	"lsd" double precision,
	"plots_used" integer NOT NULL,
	"plots_excluded" integer NOT NULL,
	"plots_missing" integer NOT NULL,
	"engine_version" text NOT NULL,
	CONSTRAINT "version_fits_version_id_trait_id_pk" PRIMARY KEY("version_id","trait_id")
);
--> statement-breakpoint
CREATE TABLE "grower_copies" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"weigh_up_id" uuid NOT NULL,
	"token_hash" text NOT NULL,
	"language" text NOT NULL,
	"snapshot" jsonb NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp with time zone NOT NULL,
	"revoked_at" timestamp with time zone,
	"openings" integer DEFAULT 0 NOT NULL,
	"last_opened_at" timestamp with time zone,
	CONSTRAINT "grower_copies_token_hash_unique" UNIQUE("token_hash"),
	CONSTRAINT "grower_copies_token_hash_shape" CHECK ("grower_copies"."token_hash" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "grower_copies_language" CHECK ("grower_copies"."language" in ('en', 'fr')),
	CONSTRAINT "grower_copies_expiry_order" CHECK ("grower_copies"."expires_at" > "grower_copies"."created_at")
);
--> statement-breakpoint
CREATE TABLE "weigh_up_candidates" (
	"weigh_up_id" uuid NOT NULL,
	"variety_id" uuid NOT NULL,
	"position" integer NOT NULL,
	CONSTRAINT "weigh_up_candidates_weigh_up_id_variety_id_pk" PRIMARY KEY("weigh_up_id","variety_id"),
	CONSTRAINT "weigh_up_candidates_position_unique" UNIQUE("weigh_up_id","position"),
	CONSTRAINT "weigh_up_candidates_position_range" CHECK ("weigh_up_candidates"."position" between 0 and 7)
);
--> statement-breakpoint
CREATE TABLE "weigh_ups" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"owner_id" uuid NOT NULL,
	"crop_id" uuid NOT NULL,
	"region_id" uuid NOT NULL,
	"season_from" integer NOT NULL,
	"season_to" integer NOT NULL,
	"grower_name" text NOT NULL,
	"farm_name" text NOT NULL,
	"area_hectares" double precision NOT NULL,
	"current_variety_id" uuid NOT NULL,
	"assumptions" jsonb NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "weigh_ups_area_positive" CHECK ("weigh_ups"."area_hectares" > 0),
	CONSTRAINT "weigh_ups_season_order" CHECK ("weigh_ups"."season_from" <= "weigh_ups"."season_to")
);
--> statement-breakpoint
ALTER TABLE "user_regions" ADD CONSTRAINT "user_regions_user_id_users_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "user_regions" ADD CONSTRAINT "user_regions_region_id_regions_id_fk" FOREIGN KEY ("region_id") REFERENCES "public"."regions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_actor_id_users_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "traits" ADD CONSTRAINT "traits_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "varieties" ADD CONSTRAINT "varieties_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sites" ADD CONSTRAINT "sites_region_id_regions_id_fk" FOREIGN KEY ("region_id") REFERENCES "public"."regions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "price_sheets" ADD CONSTRAINT "price_sheets_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "price_sheets" ADD CONSTRAINT "price_sheets_region_id_regions_id_fk" FOREIGN KEY ("region_id") REFERENCES "public"."regions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD CONSTRAINT "seed_costs_price_sheet_id_price_sheets_id_fk" FOREIGN KEY ("price_sheet_id") REFERENCES "public"."price_sheets"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD CONSTRAINT "seed_costs_variety_id_varieties_id_fk" FOREIGN KEY ("variety_id") REFERENCES "public"."varieties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_trial_id_trials_id_fk" FOREIGN KEY ("trial_id") REFERENCES "public"."trials"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entries" ADD CONSTRAINT "entries_variety_id_varieties_id_fk" FOREIGN KEY ("variety_id") REFERENCES "public"."varieties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_means" ADD CONSTRAINT "entry_means_version_id_trial_versions_id_fk" FOREIGN KEY ("version_id") REFERENCES "public"."trial_versions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_means" ADD CONSTRAINT "entry_means_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "entry_means" ADD CONSTRAINT "entry_means_variety_id_varieties_id_fk" FOREIGN KEY ("variety_id") REFERENCES "public"."varieties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "observations" ADD CONSTRAINT "observations_plot_id_plots_id_fk" FOREIGN KEY ("plot_id") REFERENCES "public"."plots"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "observations" ADD CONSTRAINT "observations_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plots" ADD CONSTRAINT "plots_trial_id_trials_id_fk" FOREIGN KEY ("trial_id") REFERENCES "public"."trials"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "plots" ADD CONSTRAINT "plots_entry_id_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entries"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "summary_errors" ADD CONSTRAINT "summary_errors_trial_id_trials_id_fk" FOREIGN KEY ("trial_id") REFERENCES "public"."trials"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "summary_errors" ADD CONSTRAINT "summary_errors_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "summary_means" ADD CONSTRAINT "summary_means_entry_id_entries_id_fk" FOREIGN KEY ("entry_id") REFERENCES "public"."entries"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "summary_means" ADD CONSTRAINT "summary_means_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trial_versions" ADD CONSTRAINT "trial_versions_trial_id_trials_id_fk" FOREIGN KEY ("trial_id") REFERENCES "public"."trials"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trial_versions" ADD CONSTRAINT "trial_versions_author_id_users_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trials" ADD CONSTRAINT "trials_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trials" ADD CONSTRAINT "trials_site_id_sites_id_fk" FOREIGN KEY ("site_id") REFERENCES "public"."sites"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "trials" ADD CONSTRAINT "trials_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "version_fits" ADD CONSTRAINT "version_fits_version_id_trial_versions_id_fk" FOREIGN KEY ("version_id") REFERENCES "public"."trial_versions"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "version_fits" ADD CONSTRAINT "version_fits_trait_id_traits_id_fk" FOREIGN KEY ("trait_id") REFERENCES "public"."traits"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grower_copies" ADD CONSTRAINT "grower_copies_weigh_up_id_weigh_ups_id_fk" FOREIGN KEY ("weigh_up_id") REFERENCES "public"."weigh_ups"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "grower_copies" ADD CONSTRAINT "grower_copies_created_by_users_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_up_candidates" ADD CONSTRAINT "weigh_up_candidates_weigh_up_id_weigh_ups_id_fk" FOREIGN KEY ("weigh_up_id") REFERENCES "public"."weigh_ups"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_up_candidates" ADD CONSTRAINT "weigh_up_candidates_variety_id_varieties_id_fk" FOREIGN KEY ("variety_id") REFERENCES "public"."varieties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_owner_id_users_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."users"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_crop_id_crops_id_fk" FOREIGN KEY ("crop_id") REFERENCES "public"."crops"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_region_id_regions_id_fk" FOREIGN KEY ("region_id") REFERENCES "public"."regions"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_current_variety_id_varieties_id_fk" FOREIGN KEY ("current_variety_id") REFERENCES "public"."varieties"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "sessions_expire_idx" ON "sessions" USING btree ("expire");--> statement-breakpoint
CREATE INDEX "user_regions_region_idx" ON "user_regions" USING btree ("region_id");--> statement-breakpoint
CREATE UNIQUE INDEX "users_email_unique" ON "users" USING btree (lower("email"));--> statement-breakpoint
CREATE INDEX "audit_events_subject_idx" ON "audit_events" USING btree ("subject_kind","subject_id");--> statement-breakpoint
CREATE INDEX "audit_events_at_idx" ON "audit_events" USING btree ("at");--> statement-breakpoint
CREATE INDEX "traits_crop_idx" ON "traits" USING btree ("crop_id");--> statement-breakpoint
CREATE INDEX "sites_region_idx" ON "sites" USING btree ("region_id");--> statement-breakpoint
CREATE INDEX "seed_costs_variety_idx" ON "seed_costs" USING btree ("variety_id");--> statement-breakpoint
CREATE INDEX "entries_variety_idx" ON "entries" USING btree ("variety_id");--> statement-breakpoint
CREATE INDEX "entry_means_variety_trait_idx" ON "entry_means" USING btree ("variety_id","trait_id");--> statement-breakpoint
CREATE INDEX "observations_trait_idx" ON "observations" USING btree ("trait_id");--> statement-breakpoint
CREATE INDEX "plots_entry_idx" ON "plots" USING btree ("entry_id");--> statement-breakpoint
CREATE INDEX "trials_crop_season_idx" ON "trials" USING btree ("crop_id","season");--> statement-breakpoint
CREATE INDEX "trials_site_idx" ON "trials" USING btree ("site_id");--> statement-breakpoint
CREATE INDEX "trials_state_idx" ON "trials" USING btree ("state");--> statement-breakpoint
CREATE INDEX "version_fits_trait_idx" ON "version_fits" USING btree ("trait_id");--> statement-breakpoint
CREATE INDEX "grower_copies_weigh_up_idx" ON "grower_copies" USING btree ("weigh_up_id");--> statement-breakpoint
CREATE INDEX "weigh_ups_owner_idx" ON "weigh_ups" USING btree ("owner_id","updated_at");