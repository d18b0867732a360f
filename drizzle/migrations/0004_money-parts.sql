ALTER TABLE "price_sheets" ADD COLUMN "harvest_per_tonne" double precision;--> statement-breakpoint
ALTER TABLE "price_sheets" ADD COLUMN "drying_per_point" double precision;--> statement-breakpoint
ALTER TABLE "price_sheets" ADD COLUMN "quality_rules" jsonb DEFAULT '[]'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "cleaning_per_tonne" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "harvest_moisture_percent" double precision;--> statement-breakpoint
ALTER TABLE "seed_costs" ADD COLUMN "straw_per_hectare" double precision;--> statement-breakpoint
ALTER TABLE "price_sheets" ADD CONSTRAINT "price_sheets_harvest_drying_positive" CHECK ("price_sheets"."harvest_per_tonne" >= 0 and "price_sheets"."drying_per_point" >= 0);--> statement-breakpoint
ALTER TABLE "seed_costs" ADD CONSTRAINT "seed_costs_rate_range" CHECK ("seed_costs"."seed_price_per_kg" >= 0 and "seed_costs"."thousand_kernel_weight_g" > 0 and "seed_costs"."target_plants_m2" > 0
        and "seed_costs"."germination_percent" between 1 and 100 and "seed_costs"."mortality_percent" between 0 and 99);--> statement-breakpoint
ALTER TABLE "seed_costs" ADD CONSTRAINT "seed_costs_grain_range" CHECK ("seed_costs"."cleaning_per_tonne" >= 0 and "seed_costs"."straw_per_hectare" >= 0
        and "seed_costs"."harvest_moisture_percent" between 0 and 60);