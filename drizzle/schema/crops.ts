import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  index,
  integer,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';

/** A crop with the bases its yields are stated on. */
export const crops = pgTable(
  'crops',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    slug: text('slug').notNull().unique(),
    nameEn: text('name_en').notNull(),
    nameFr: text('name_fr').notNull(),
    eppoCode: text('eppo_code').notNull(),
    standardMoisturePercent: doublePrecision('standard_moisture_percent').notNull(),
    /** Bushel of account in pounds, for reading bu/ac. */
    bushelWeightLb: doublePrecision('bushel_weight_lb').notNull(),
    /** A trial whose CV is above this counts as weak. */
    cvLimitPercent: doublePrecision('cv_limit_percent').notNull(),
    /** Typical yield at standard moisture, t/ha: the base of the default usual variances. */
    typicalYield: doublePrecision('typical_yield').notNull(),
  },
  (table) => [
    check('crops_moisture_range', sql`${table.standardMoisturePercent} between 0 and 40`),
    check('crops_bushel_positive', sql`${table.bushelWeightLb} > 0`),
    check('crops_cv_limit_positive', sql`${table.cvLimitPercent} > 0`),
    check('crops_typical_yield_positive', sql`${table.typicalYield} > 0`),
  ],
);

/** A variety of a crop under its usual name; other spellings are aliases. */
export const varieties = pgTable(
  'varieties',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    name: text('name').notNull(),
    aliases: text('aliases')
      .array()
      .notNull()
      .default(sql`'{}'::text[]`),
    isCheck: boolean('is_check').notNull().default(false),
    firstSeason: integer('first_season'),
  },
  (table) => [unique('varieties_crop_name_unique').on(table.cropId, table.name)],
);

/** What is measured on a crop, with the direction that is better and the smallest gap that matters. */
export const traits = pgTable(
  'traits',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    slug: text('slug').notNull(),
    nameEn: text('name_en').notNull(),
    nameFr: text('name_fr').notNull(),
    unit: text('unit').notNull(),
    kind: text('kind', { enum: ['numeric', 'ordinal'] }).notNull(),
    direction: text('direction', { enum: ['higher', 'lower', 'neutral'] }).notNull(),
    /** In the trait's unit; null where nobody has set one. */
    practicalMargin: doublePrecision('practical_margin'),
    scaleMin: doublePrecision('scale_min'),
    scaleMax: doublePrecision('scale_max'),
    position: integer('position').notNull().default(0),
  },
  (table) => [
    unique('traits_crop_slug_unique').on(table.cropId, table.slug),
    index('traits_crop_idx').on(table.cropId),
    check('traits_kind', sql`${table.kind} in ('numeric', 'ordinal')`),
    check('traits_direction', sql`${table.direction} in ('higher', 'lower', 'neutral')`),
    check('traits_margin_positive', sql`${table.practicalMargin} is null or ${table.practicalMargin} >= 0`),
    check(
      'traits_scale_order',
      sql`${table.scaleMin} is null or ${table.scaleMax} is null or ${table.scaleMin} < ${table.scaleMax}`,
    ),
  ],
);
