import { sql } from 'drizzle-orm';
import {
  check,
  date,
  doublePrecision,
  index,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { crops, varieties } from './crops.ts';
import { regions } from './geography.ts';

/** Dated price and cost defaults of a crop in a region. Money is in the sheet's currency; tonnes at standard moisture. */
export const priceSheets = pgTable(
  'price_sheets',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    regionId: uuid('region_id')
      .notNull()
      .references(() => regions.id),
    effectiveOn: date('effective_on', { mode: 'string' }).notNull(),
    currency: text('currency').notNull(),
    priceLow: doublePrecision('price_low').notNull(),
    priceMiddle: doublePrecision('price_middle').notNull(),
    priceHigh: doublePrecision('price_high').notNull(),
    haulagePerTonne: doublePrecision('haulage_per_tonne').notNull().default(0),
    dryingPerTonne: doublePrecision('drying_per_tonne').notNull().default(0),
    /** What is paid by the tonne for harvesting, and for each point of moisture above the standard; null where nothing is. */
    harvestPerTonne: doublePrecision('harvest_per_tonne'),
    dryingPerPoint: doublePrecision('drying_per_point'),
    /** What buyers add or take off by the level of a trait: QualityRule[] of shared/money.ts. */
    qualityRules: jsonb('quality_rules').notNull().default([]),
  },
  (table) => [
    unique('price_sheets_identity_unique').on(table.cropId, table.regionId, table.effectiveOn),
    check('price_sheets_currency_iso4217', sql`${table.currency} ~ '^[A-Z]{3}$'`),
    check(
      'price_sheets_order',
      sql`${table.priceLow} > 0 and ${table.priceLow} <= ${table.priceMiddle} and ${table.priceMiddle} <= ${table.priceHigh}`,
    ),
    check('price_sheets_costs_positive', sql`${table.haulagePerTonne} >= 0 and ${table.dryingPerTonne} >= 0`),
    check(
      'price_sheets_harvest_drying_positive',
      sql`${table.harvestPerTonne} >= 0 and ${table.dryingPerPoint} >= 0`,
    ),
  ],
);

/** What a variety's seed costs on a sheet, per hectare, with what it is made of. */
export const seedCosts = pgTable(
  'seed_costs',
  {
    priceSheetId: uuid('price_sheet_id')
      .notNull()
      .references(() => priceSheets.id, { onDelete: 'cascade' }),
    varietyId: uuid('variety_id')
      .notNull()
      .references(() => varieties.id),
    seedPerHectare: doublePrecision('seed_per_hectare').notNull(),
    treatmentPerHectare: doublePrecision('treatment_per_hectare').notNull().default(0),
    royaltyPerHectare: doublePrecision('royalty_per_hectare').notNull().default(0),
    /** What a seeding rate is reckoned from; null where only the cost per hectare is known. */
    seedPricePerKg: doublePrecision('seed_price_per_kg'),
    thousandKernelWeightG: doublePrecision('thousand_kernel_weight_g'),
    germinationPercent: doublePrecision('germination_percent'),
    mortalityPercent: doublePrecision('mortality_percent'),
    targetPlantsM2: doublePrecision('target_plants_m2'),
    /** Of grain kept back as seed, per tonne. */
    cleaningPerTonne: doublePrecision('cleaning_per_tonne'),
    /** Moisture of the variety's grain when it usually comes off the field, and what its straw brings. */
    harvestMoisturePercent: doublePrecision('harvest_moisture_percent'),
    strawPerHectare: doublePrecision('straw_per_hectare'),
  },
  (table) => [
    primaryKey({ columns: [table.priceSheetId, table.varietyId] }),
    index('seed_costs_variety_idx').on(table.varietyId),
    check(
      'seed_costs_positive',
      sql`${table.seedPerHectare} >= 0 and ${table.treatmentPerHectare} >= 0 and ${table.royaltyPerHectare} >= 0`,
    ),
    check(
      'seed_costs_rate_range',
      sql`${table.seedPricePerKg} >= 0 and ${table.thousandKernelWeightG} > 0 and ${table.targetPlantsM2} > 0
        and ${table.germinationPercent} between 1 and 100 and ${table.mortalityPercent} between 0 and 99`,
    ),
    check(
      'seed_costs_grain_range',
      sql`${table.cleaningPerTonne} >= 0 and ${table.strawPerHectare} >= 0
        and ${table.harvestMoisturePercent} between 0 and 60`,
    ),
  ],
);
