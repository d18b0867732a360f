import { randomUUID } from 'node:crypto';
import { sql } from 'drizzle-orm';
import { trials } from '#drizzle/schema/trials.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';

/** A trial to be stored as a working copy, with the catalogue's ids for the names in its content. */
export type NewTrial = {
  id: string;
  cropId: string;
  siteId: string;
  state: 'draft' | 'in-review';
  createdBy: string | null;
  createdAt?: Date;
  content: TrialContent;
  /** By the variety names of the content. */
  varietyIds: ReadonlyMap<string, string>;
  /** By the trait slugs of the content. */
  traitIds: ReadonlyMap<string, string>;
};

/**
 * Stores working copies with their entries, plots and values: a handful of statements however many trials.
 * Call it in a transaction. A trial that is there already breaks `trials_identity_unique`.
 */
export async function insertTrialContents(
  tx: DatabaseOrTransaction,
  newTrials: readonly NewTrial[],
): Promise<void> {
  if (newTrials.length === 0) return;
  await tx.insert(trials).values(newTrials.map(toTrialRow));
  const entryRows = newTrials.flatMap((trial) =>
    trial.content.entries.map((entry) => ({
      id: randomUUID(),
      trial,
      label: entry.label,
      varietyId: entry.varietyName === null ? null : idOf(trial.varietyIds, entry.varietyName),
      isCheck: entry.isCheck,
    })),
  );
  await tx.execute(sql`insert into entries (id, trial_id, label, variety_id, is_check)
    select * from unnest(
      ${list(entryRows, (row) => row.id)}::uuid[],
      ${list(entryRows, (row) => row.trial.id)}::uuid[],
      ${list(entryRows, (row) => row.label)}::text[],
      ${list(entryRows, (row) => row.varietyId)}::uuid[],
      ${list(entryRows, (row) => row.isCheck)}::boolean[])`);
  const entryIds = new Map(entryRows.map((row) => [`${row.trial.id} ${row.label}`, row.id]));
  await insertPlots(tx, newTrials, entryIds);
  await insertSummaries(tx, newTrials, entryIds);
}

function toTrialRow({ id, cropId, siteId, state, createdBy, createdAt, content }: NewTrial) {
  const { season, name, design, kind, alpha, management, sownOn, harvestedOn } = content;
  const head = { season, name, design, kind, alpha, management, sownOn, harvestedOn };
  return { id, cropId, siteId, state, createdBy, ...(createdAt && { createdAt }), ...head };
}

async function insertPlots(
  tx: DatabaseOrTransaction,
  newTrials: readonly NewTrial[],
  entryIds: ReadonlyMap<string, string>,
): Promise<void> {
  const rows = newTrials.flatMap((trial) =>
    trial.content.plots.map((plot) => ({
      id: randomUUID(),
      trial,
      plot,
      entryId: idOf(entryIds, `${trial.id} ${plot.entry}`),
    })),
  );
  if (rows.length === 0) return;
  await tx.execute(sql`insert into plots
    (id, trial_id, entry_id, plot_number, rep, block, row, col, main_level, factor_levels, excluded_reason)
    select * from unnest(
      ${list(rows, (row) => row.id)}::uuid[],
      ${list(rows, (row) => row.trial.id)}::uuid[],
      ${list(rows, (row) => row.entryId)}::uuid[],
      ${list(rows, (row) => row.plot.plotNumber)}::text[],
      ${list(rows, (row) => row.plot.rep)}::text[],
      ${list(rows, (row) => row.plot.block)}::text[],
      ${list(rows, (row) => row.plot.row)}::integer[],
      ${list(rows, (row) => row.plot.col)}::integer[],
      ${list(rows, (row) => row.plot.mainLevel)}::text[],
      ${list(rows, (row) => row.plot.factorLevels && JSON.stringify(row.plot.factorLevels))}::jsonb[],
      ${list(rows, (row) => row.plot.excludedReason)}::text[])`);
  const values = rows.flatMap((row) =>
    Object.entries(row.plot.values).map(([trait, value]) => ({
      plotId: row.id,
      traitId: idOf(row.trial.traitIds, trait),
      value,
    })),
  );
  await tx.execute(sql`insert into observations (plot_id, trait_id, value)
    select * from unnest(
      ${list(values, (row) => row.plotId)}::uuid[],
      ${list(values, (row) => row.traitId)}::uuid[],
      ${list(values, (row) => row.value)}::double precision[])`);
}

async function insertSummaries(
  tx: DatabaseOrTransaction,
  newTrials: readonly NewTrial[],
  entryIds: ReadonlyMap<string, string>,
): Promise<void> {
  const columns = newTrials.flatMap((trial) =>
    trial.content.summary.map((column) => ({ trial, column, traitId: idOf(trial.traitIds, column.trait) })),
  );
  if (columns.length === 0) return;
  const means = columns.flatMap(({ trial, column, traitId }) =>
    column.means.map((mean) => ({ ...mean, traitId, entryId: idOf(entryIds, `${trial.id} ${mean.entry}`) })),
  );
  await tx.execute(sql`insert into summary_means (entry_id, trait_id, mean, replicates)
    select * from unnest(
      ${list(means, (row) => row.entryId)}::uuid[],
      ${list(means, (row) => row.traitId)}::uuid[],
      ${list(means, (row) => row.mean)}::double precision[],
      ${list(means, (row) => row.replicates)}::integer[])`);
  await tx.execute(sql`insert into summary_errors
    (trial_id, trait_id, lsd, lsd_alpha, cv_percent, standard_error, residual_ms, error_df)
    select * from unnest(
      ${list(columns, (row) => row.trial.id)}::uuid[],
      ${list(columns, (row) => row.traitId)}::uuid[],
      ${list(columns, (row) => row.column.lsd)}::double precision[],
      ${list(columns, (row) => row.column.lsdAlpha)}::double precision[],
      ${list(columns, (row) => row.column.cvPercent)}::double precision[],
      ${list(columns, (row) => row.column.standardError)}::double precision[],
      ${list(columns, (row) => row.column.residualMs)}::double precision[],
      ${list(columns, (row) => row.column.errorDf)}::double precision[])`);
}

/** One column of many rows as a single array parameter. */
function list<T>(rows: readonly T[], pick: (row: T) => string | number | boolean | null) {
  return sql.param(rows.map(pick));
}

function idOf(ids: ReadonlyMap<string, string>, name: string): string {
  const id = ids.get(name);
  if (id === undefined) throw new Error(`No id for ${name}`);
  return id;
}
