import { sql } from 'drizzle-orm';
import { check, doublePrecision, index, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';

/** A region in which varieties are recommended; an advisor works in one or more of them. */
export const regions = pgTable('regions', {
  id: uuid('id').primaryKey().defaultRandom(),
  slug: text('slug').notNull().unique(),
  nameEn: text('name_en').notNull(),
  nameFr: text('name_fr').notNull(),
});

/** A place where trials are sown. Rain and heat are the normal of the growing season. */
export const sites = pgTable(
  'sites',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    slug: text('slug').notNull().unique(),
    name: text('name').notNull(),
    regionId: uuid('region_id')
      .notNull()
      .references(() => regions.id),
    latitude: doublePrecision('latitude').notNull(),
    longitude: doublePrecision('longitude').notNull(),
    elevationM: doublePrecision('elevation_m').notNull(),
    seasonRainMm: doublePrecision('season_rain_mm').notNull(),
    heatSumDegreeDays: doublePrecision('heat_sum_degree_days').notNull(),
    soilTexture: text('soil_texture').notNull(),
    soilPh: doublePrecision('soil_ph').notNull(),
  },
  (table) => [
    index('sites_region_idx').on(table.regionId),
    check('sites_latitude_range', sql`${table.latitude} between -90 and 90`),
    check('sites_longitude_range', sql`${table.longitude} between -180 and 180`),
    check('sites_rain_positive', sql`${table.seasonRainMm} >= 0`),
    check('sites_heat_positive', sql`${table.heatSumDegreeDays} >= 0`),
    check('sites_ph_range', sql`${table.soilPh} between 3 and 11`),
    check(
      'sites_soil_texture',
      sql`${table.soilTexture} in ('sand', 'sandy-loam', 'loam', 'silt-loam', 'clay-loam', 'clay')`,
    ),
  ],
);

/** A town that an advisor may name instead of coordinates, with the normal of its growing season. */
export const places = pgTable(
  'places',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    name: text('name').notNull(),
    regionId: uuid('region_id')
      .notNull()
      .references(() => regions.id),
    latitude: doublePrecision('latitude').notNull(),
    longitude: doublePrecision('longitude').notNull(),
    seasonRainMm: doublePrecision('season_rain_mm').notNull(),
    heatSumDegreeDays: doublePrecision('heat_sum_degree_days').notNull(),
    soilTexture: text('soil_texture').notNull(),
  },
  (table) => [
    unique('places_name_unique').on(table.regionId, table.name),
    check('places_latitude_range', sql`${table.latitude} between -90 and 90`),
    check('places_longitude_range', sql`${table.longitude} between -180 and 180`),
  ],
);
