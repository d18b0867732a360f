import { sql } from 'drizzle-orm';
import {
  boolean,
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
  uniqueIndex,
  uuid,
  type AnyPgColumn,
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
    /** several: these candidates against the current one; pair: one planned pair; best: the best of the list. */
    question: text('question', { enum: ['several', 'pair', 'best'] })
      .notNull()
      .default('several'),
    /** Where the farm lies and what grows there; null where nobody has said. */
    farmLatitude: doublePrecision('farm_latitude'),
    farmLongitude: doublePrecision('farm_longitude'),
    farmSeasonRainMm: doublePrecision('farm_season_rain_mm'),
    farmHeatSumDegreeDays: doublePrecision('farm_heat_sum_degree_days'),
    farmSoilTexture: text('farm_soil_texture'),
    /** The grower's usual yield of the crop at standard moisture, t/ha. */
    usualYield: doublePrecision('usual_yield'),
    /** region: its trials; nearest: those nearest the farm, whatever region they lie in. */
    trialChoice: text('trial_choice', { enum: ['region', 'nearest'] })
      .notNull()
      .default('region'),
    includeNeighbours: boolean('include_neighbours').notNull().default(false),
    /** Trials ticked off by the advisor, each with its reason. */
    tickedOff: jsonb('ticked_off').$type<{ trialId: string; reason: string }[]>().notNull().default([]),
    /** Decision of shared/weigh-up.ts; null until one is recorded. */
    decision: jsonb('decision'),
    archivedAt: timestamp('archived_at', { withTimezone: true }),
    revision: integer('revision').notNull().default(1),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    index('weigh_ups_owner_idx').on(table.ownerId, table.updatedAt),
    check('weigh_ups_area_positive', sql`${table.areaHectares} > 0`),
    check('weigh_ups_season_order', sql`${table.seasonFrom} <= ${table.seasonTo}`),
    check('weigh_ups_question', sql`${table.question} in ('several', 'pair', 'best')`),
    check('weigh_ups_trial_choice', sql`${table.trialChoice} in ('region', 'nearest')`),
    check(
      'weigh_ups_farm_place',
      sql`(${table.farmLatitude} is null) = (${table.farmLongitude} is null) and ${table.farmLatitude} between -90 and 90 and ${table.farmLongitude} between -180 and 180`,
    ),
    check('weigh_ups_usual_yield_positive', sql`${table.usualYield} > 0`),
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

/** The sentences that copies were made with, once for each wording: a copy goes on speaking as it did. */
export const frozenSentences = pgTable(
  'frozen_sentences',
  {
    /** SHA-256 in hex of the sentences. */
    hash: text('hash').primaryKey(),
    /** By language, then namespace; see server/grower-copy/copy-sentences.ts. */
    sentences: jsonb('sentences').notNull(),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [check('frozen_sentences_hash_shape', sql`${table.hash} ~ '^[0-9a-f]{64}$'`)],
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
    /** The copy whose place this one takes, since trials in that one have changed. */
    followsId: uuid('follows_id').references((): AnyPgColumn => growerCopies.id, { onDelete: 'set null' }),
  },
  (table) => [
    index('grower_copies_weigh_up_idx').on(table.weighUpId),
    // Two clicks, or two tabs, make one fresh copy; a revoked one leaves its place to the next.
    uniqueIndex('grower_copies_follows_unique')
      .on(table.followsId)
      .where(sql`${table.revokedAt} is null`),
    check('grower_copies_token_hash_shape', sql`${table.tokenHash} ~ '^[0-9a-f]{64}$'`),
    check('grower_copies_language', sql`${table.language} in ('en', 'fr')`),
    check('grower_copies_expiry_order', sql`${table.expiresAt} > ${table.createdAt}`),
  ],
);

/** A weigh-up being written: saved as it is typed, so that nothing is lost. */
export const weighUpDrafts = pgTable(
  'weigh_up_drafts',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    ownerId: uuid('owner_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    /** WeighUpDraft of shared/weigh-up.ts: any part of the question may still be missing. */
    content: jsonb('content').notNull(),
    revision: integer('revision').notNull().default(1),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [index('weigh_up_drafts_owner_idx').on(table.ownerId, table.updatedAt)],
);

/** Answers already computed, under a hash of trial versions, options and engine version: what changes any of them asks anew. */
export const storedAnswers = pgTable(
  'stored_answers',
  {
    /** SHA-256 in hex of what the answer rests on. */
    key: text('key').primaryKey(),
    answer: jsonb('answer').notNull(),
    engineVersion: text('engine_version').notNull(),
    computedAt: timestamp('computed_at', { withTimezone: true }).notNull().defaultNow(),
    lastUsedAt: timestamp('last_used_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    index('stored_answers_last_used_idx').on(table.lastUsedAt),
    check('stored_answers_key_shape', sql`${table.key} ~ '^[0-9a-f]{64}$'`),
  ],
);
