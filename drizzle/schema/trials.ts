import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  date,
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
import { crops, traits, varieties } from './crops.ts';
import { sites } from './geography.ts';

/** One trial: a crop at a site in a season, laid out in one design. The desk works on this row; readers see versions. */
export const trials = pgTable(
  'trials',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    cropId: uuid('crop_id')
      .notNull()
      .references(() => crops.id),
    siteId: uuid('site_id')
      .notNull()
      .references(() => sites.id),
    season: integer('season').notNull(),
    /** Tells two trials of one crop, site and season apart. */
    name: text('name').notNull(),
    design: text('design', {
      enum: [
        'crd',
        'rcbd',
        'latin-square',
        'incomplete-blocks',
        'row-column',
        'split-plot',
        'factorial',
        'strips',
      ],
    }).notNull(),
    /** plots: raw plot values; summary: published means with their measure of error. */
    kind: text('kind', { enum: ['plots', 'summary'] }).notNull(),
    state: text('state', { enum: ['draft', 'in-review', 'published', 'withdrawn'] })
      .notNull()
      .default('draft'),
    alpha: doublePrecision('alpha').notNull().default(0.05),
    /** { fungicide, irrigated, seedingRatePlantsM2, previousCrop, sownOn, harvestedOn, note } */
    management: jsonb('management').$type<Record<string, string | number | boolean>>().notNull().default({}),
    sownOn: date('sown_on', { mode: 'string' }),
    harvestedOn: date('harvested_on', { mode: 'string' }),
    createdBy: uuid('created_by').references(() => users.id),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
    /** Counts saves; a save that names an older number is refused. */
    revision: integer('revision').notNull().default(1),
  },
  (table) => [
    unique('trials_identity_unique').on(table.cropId, table.siteId, table.season, table.name),
    index('trials_crop_season_idx').on(table.cropId, table.season),
    index('trials_site_idx').on(table.siteId),
    index('trials_state_idx').on(table.state),
    check('trials_season_range', sql`${table.season} between 1900 and 2200`),
    check('trials_alpha_range', sql`${table.alpha} > 0 and ${table.alpha} < 0.5`),
    check(
      'trials_design',
      sql`${table.design} in ('crd', 'rcbd', 'latin-square', 'incomplete-blocks', 'row-column', 'split-plot', 'factorial', 'strips')`,
    ),
    check('trials_kind', sql`${table.kind} in ('plots', 'summary')`),
    check('trials_state', sql`${table.state} in ('draft', 'in-review', 'published', 'withdrawn')`),
  ],
);

/** What was sown in a trial under one label: usually a variety, else an input such as a seeding rate. */
export const entries = pgTable(
  'entries',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    trialId: uuid('trial_id')
      .notNull()
      .references(() => trials.id, { onDelete: 'cascade' }),
    label: text('label').notNull(),
    varietyId: uuid('variety_id').references(() => varieties.id),
    isCheck: boolean('is_check').notNull().default(false),
  },
  (table) => [
    unique('entries_trial_label_unique').on(table.trialId, table.label),
    index('entries_variety_idx').on(table.varietyId),
  ],
);

/** A plot as it lay in the field. Left out only with a reason, never deleted. */
export const plots = pgTable(
  'plots',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    trialId: uuid('trial_id')
      .notNull()
      .references(() => trials.id, { onDelete: 'cascade' }),
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entries.id, { onDelete: 'cascade' }),
    plotNumber: text('plot_number').notNull(),
    rep: text('rep'),
    block: text('block'),
    row: integer('row'),
    col: integer('col'),
    /** Level of the main-plot factor of a split plot. */
    mainLevel: text('main_level'),
    /** Levels of the factors of a factorial, by factor name. */
    factorLevels: jsonb('factor_levels').$type<Record<string, string>>(),
    excludedReason: text('excluded_reason'),
  },
  (table) => [
    unique('plots_trial_number_unique').on(table.trialId, table.plotNumber),
    index('plots_entry_idx').on(table.entryId),
    check(
      'plots_excluded_reason_said',
      sql`${table.excludedReason} is null or length(trim(${table.excludedReason})) > 0`,
    ),
  ],
);

/** The value of one trait on one plot; no row where the plot was not measured. */
export const observations = pgTable(
  'observations',
  {
    plotId: uuid('plot_id')
      .notNull()
      .references(() => plots.id, { onDelete: 'cascade' }),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    value: doublePrecision('value').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.plotId, table.traitId] }),
    index('observations_trait_idx').on(table.traitId),
  ],
);

/** A published mean of a summary trial. */
export const summaryMeans = pgTable(
  'summary_means',
  {
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entries.id, { onDelete: 'cascade' }),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    mean: doublePrecision('mean').notNull(),
    replicates: integer('replicates').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.entryId, table.traitId] }),
    check('summary_means_replicates_positive', sql`${table.replicates} > 0`),
  ],
);

/** The measures of error printed under a column of a summary trial; at least one is given. */
export const summaryErrors = pgTable(
  'summary_errors',
  {
    trialId: uuid('trial_id')
      .notNull()
      .references(() => trials.id, { onDelete: 'cascade' }),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    lsd: doublePrecision('lsd'),
    lsdAlpha: doublePrecision('lsd_alpha'),
    cvPercent: doublePrecision('cv_percent'),
    standardError: doublePrecision('standard_error'),
    residualMs: doublePrecision('residual_ms'),
    errorDf: doublePrecision('error_df'),
  },
  (table) => [
    primaryKey({ columns: [table.trialId, table.traitId] }),
    check(
      'summary_errors_one_given',
      sql`coalesce(${table.lsd}, ${table.cvPercent}, ${table.standardError}, ${table.residualMs}) is not null`,
    ),
    check('summary_errors_lsd_has_alpha', sql`${table.lsd} is null or ${table.lsdAlpha} is not null`),
  ],
);

/** What was published, or that it was withdrawn, for ever: rows are never updated or deleted (a trigger sees to it). */
export const trialVersions = pgTable(
  'trial_versions',
  {
    id: uuid('id').primaryKey().defaultRandom(),
    trialId: uuid('trial_id')
      .notNull()
      .references(() => trials.id),
    number: integer('number').notNull(),
    action: text('action', { enum: ['publish', 'withdraw'] }).notNull(),
    /** The trial whole: head, entries, plots with values, exclusions (TrialContent of shared/trial-content.ts). */
    content: jsonb('content').notNull(),
    /** SHA-256 in hex of the canonical JSON of content. */
    sha256: text('sha256').notNull(),
    authorId: uuid('author_id').references(() => users.id),
    at: timestamp('at', { withTimezone: true }).notNull().defaultNow(),
    reason: text('reason').notNull(),
  },
  (table) => [
    unique('trial_versions_number_unique').on(table.trialId, table.number),
    check('trial_versions_number_positive', sql`${table.number} > 0`),
    check('trial_versions_sha256_shape', sql`${table.sha256} ~ '^[0-9a-f]{64}$'`),
    check('trial_versions_action', sql`${table.action} in ('publish', 'withdraw')`),
    check('trial_versions_reason_said', sql`length(trim(${table.reason})) > 0`),
  ],
);

/** The fit of one trait in one version: what the list, the cautions and the pooled error variance read. */
export const versionFits = pgTable(
  'version_fits',
  {
    versionId: uuid('version_id')
      .notNull()
      .references(() => trialVersions.id, { onDelete: 'cascade' }),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    grandMean: doublePrecision('grand_mean').notNull(),
    residualMs: doublePrecision('residual_ms'),
    residualDf: doublePrecision('residual_df'),
    cvPercent: doublePrecision('cv_percent'),
    /** p of the F test of the entries; null where there is none. */
    entryP: doublePrecision('entry_p'),
    lsd: doublePrecision('lsd'),
    plotsUsed: integer('plots_used').notNull(),
    plotsExcluded: integer('plots_excluded').notNull(),
    plotsMissing: integer('plots_missing').notNull(),
    engineVersion: text('engine_version').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.versionId, table.traitId] }),
    index('version_fits_trait_idx').on(table.traitId),
  ],
);

/** The adjusted mean of an entry in one version and trait; its variance is half the mean variance of its differences. */
export const entryMeans = pgTable(
  'entry_means',
  {
    versionId: uuid('version_id')
      .notNull()
      .references(() => trialVersions.id, { onDelete: 'cascade' }),
    traitId: uuid('trait_id')
      .notNull()
      .references(() => traits.id),
    entryLabel: text('entry_label').notNull(),
    varietyId: uuid('variety_id').references(() => varieties.id),
    mean: doublePrecision('mean').notNull(),
    variance: doublePrecision('variance'),
    df: doublePrecision('df'),
    plotsUsed: integer('plots_used').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.versionId, table.traitId, table.entryLabel] }),
    index('entry_means_variety_trait_idx').on(table.varietyId, table.traitId),
    check('entry_means_variance_positive', sql`${table.variance} is null or ${table.variance} >= 0`),
  ],
);
