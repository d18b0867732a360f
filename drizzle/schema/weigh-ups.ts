import { sql } from 'drizzle-orm';
import {
  check,
  doublePrecision,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  timestamp,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { users } from './accounts.ts';
import { crops, varieties } from './crops.ts';
import { regions } from './geography.ts';

/** One grower's question: crop, region, what is sown today, money assumptions. */
export const weighUps = pgTable(
  'weigh_ups',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    ownerId: uuid('owner_id')
      .notNull()
      .references(() => users.id),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    regionId: uuid('region_id')
      .notNull()
      .references(() => regions.id),
    seasonFrom: integer('season_from').notNull(),
    seasonTo: integer('season_to').notNull(),
    growerName: text('grower_name').notNull(),
    farmName: text('farm_name').notNull(),
    areaHectares: doublePrecision('area_hectares').notNull(),
    currentVarietyId: uuid('current_variety_id')
      .notNull()
      .references(() => varieties.id),
    /** MoneyAssumptions of shared/money.ts. */
    assumptions: jsonb('assumptions').notNull(),
    revision: integer('revision').notNull().default(1),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    index('weigh_ups_owner_idx').on(table.ownerId, table.updatedAt),
    check('weigh_ups_area_positive', sql`${table.areaHectares} > 0`),
    check('weigh_ups_season_order', sql`${table.seasonFrom} <= ${table.seasonTo}`),
  ],
);

/** The varieties weighed against the current one, in the advisor's order. */
export const weighUpCandidates = pgTable(
  'weigh_up_candidates',
  {
    weighUpId: uuid('weigh_up_id')
      .notNull()
      .references(() => weighUps.id, { onDelete: 'cascade' }),
    varietyId: uuid('variety_id')
      .notNull()
      .references(() => varieties.id),
    position: integer('position').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.weighUpId, table.varietyId] }),
    unique('weigh_up_candidates_position_unique').on(table.weighUpId, table.position),
    check('weigh_up_candidates_position_range', sql`${table.position} between 0 and 7`),
  ],
);

/** The frozen, read-only copy behind a link. Only the hash of the link's secret is kept. */
export const growerCopies = pgTable(
  'grower_copies',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    weighUpId: uuid('weigh_up_id')
      .notNull()
      .references(() => weighUps.id, { onDelete: 'cascade' }),
    /** SHA-256 in hex of the secret in the link. */
    tokenHash: text('token_hash').notNull().unique(),
    language: text('language', { enum: ['en', 'fr'] }).notNull(),
    /** GrowerCopySnapshot of shared/grower-copy.ts. */
    snapshot: jsonb('snapshot').notNull(),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => users.id),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    expiresAt: timestamp('expires_at', { withTimezone: true }).notNull(),
    revokedAt: timestamp('revoked_at', { withTimezone: true }),
    openings: integer('openings').notNull().default(0),
    lastOpenedAt: timestamp('last_opened_at', { withTimezone: true }),
  },
  (table) => [
    index('grower_copies_weigh_up_idx').on(table.weighUpId),
    check('grower_copies_token_hash_shape', sql`${table.tokenHash} ~ '^[0-9a-f]{64}$'`),
    check('grower_copies_language', sql`${table.language} in ('en', 'fr')`),
    check('grower_copies_expiry_order', sql`${table.expiresAt} > ${table.createdAt}`),
  ],
);
