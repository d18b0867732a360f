import { sql } from 'drizzle-orm';
import { check, doublePrecision, index, integer, pgTable, text, timestamp, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts.ts';
import { crops, traits } from './crops.ts';

/**
 * Usual interaction variances of a crop's trait, in the trait's unit squared. The newest row counts, older ones are the history;
 * without a row the crop's defaults hold.
 */
export const usualVariances = pgTable(
  'usual_variances',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    site: doublePrecision('site').notNull(),
    season: doublePrecision('season').notNull(),
    rest: doublePrecision('rest').notNull(),
    /** Standard errors of the three, from the expected information; null where not to be had. */
    siteSe: doublePrecision('site_se'),
    seasonSe: doublePrecision('season_se'),
    restSe: doublePrecision('rest_se'),
    environments: integer('environments').notNull(),
    seasons: integer('seasons').notNull(),
    entries: integer('entries').notNull(),
    engineVersion: text('engine_version').notNull(),
    estimatedAt: timestamp('estimated_at', { withTimezone: true }).notNull().defaultNow(),
    estimatedBy: uuid('estimated_by').references(() => users.id),
  },
  (table) => [
    index('usual_variances_newest_idx').on(table.traitId, table.estimatedAt),
    check(
      'usual_variances_positive',
      sql`${table.site} >= 0 and ${table.season} >= 0 and ${table.rest} >= 0`,
    ),
  ],
);
