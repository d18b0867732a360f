import { randomUUID } from 'node:crypto';
import { CodedError } from '#shared/error-codes.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import {
  importByteLimit,
  importRowLimit,
  type ImportFields,
  type ImportReport,
  type RowProblem,
} from '#shared/trial-desk.ts';
import { toTonnesPerHectare, type YieldUnit } from '#shared/units.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import { isUniqueViolation, type DatabaseOrTransaction } from '#server/db.ts';
import { insertTrialContents } from '#server/trials/trial-content-insert.ts';
import { readImportCatalogue, type ImportCatalogue } from './import-catalogue.ts';
import type { ColumnChoice } from './match-columns.ts';
import { readLongCsv, type ReadFile } from './read-long-csv.ts';
import type { ReadPlot } from './read-row.ts';
import type { ProblemReason } from './row-problems.ts';

/** What is asked of a file: the form's fields, and columns chosen by hand. */
export type ImportRequest = ImportFields & Pick<ColumnChoice, 'columns' | 'factors'>;

/** A file as read: its report, and the trial in it unless something is wrong. */
export type CheckedImport = {
  report: ImportReport;
  catalogue: ImportCatalogue;
  content: TrialContent | null;
};

/** A median yield beyond these shares of the crop's usual one is in another unit, or lost its decimal sign. */
const doubtfulShares = { low: 1 / 20, high: 8 };

/**
 * Reads a file against the catalogue; stores nothing.
 * @param regionIds regions whose trials may be brought in; null for all
 * @throws CodedError import-too-large, invalid-input (crop, site or trait unknown), region-not-yours
 */
export async function checkTrialFile(
  db: DatabaseOrTransaction,
  bytes: Uint8Array,
  request: ImportRequest,
  regionIds: readonly string[] | null,
): Promise<CheckedImport> {
  if (bytes.length > importByteLimit)
    throw new CodedError('import-too-large', { values: { limit: importRowLimit } });
  const catalogue = await readImportCatalogue(db, request);
  if (regionIds !== null && !regionIds.includes(catalogue.site.regionId))
    throw new CodedError('region-not-yours');
  const file = readLongCsv(bytes, { ...request, traits: catalogue.traits, rowLimit: importRowLimit });
  const unitProblem = findUnitProblem(file, request, catalogue);
  const problems = unitProblem === null ? file.problems : [...file.problems, unitProblem];
  const content = problems.length > 0 ? null : writeContent(file, request, catalogue);
  const report: ImportReport = {
    rows: file.rows,
    plots: file.plots.length,
    entries: content?.entries.length ?? 0,
    traits: file.traits,
    unknownVarieties: (content?.entries ?? []).flatMap((entry) =>
      entry.varietyName === null ? [entry.label] : [],
    ),
    problems,
    problemsTotal: file.problemsTotal + (unitProblem === null ? 0 : 1),
  };
  return { report, catalogue, content };
}

/**
 * Stores the trial of a checked file as a draft, whole.
 * @returns the trial's id
 * @throws CodedError import-refused with the problems as issues, trial-exists
 */
export async function storeTrialFile(
  db: DatabaseOrTransaction,
  { report, catalogue, content }: CheckedImport,
  authorId: string | null,
): Promise<string> {
  if (content === null) throw new CodedError('import-refused', refusal(report));
  const id = randomUUID();
  try {
    await db.transaction(async (tx) => {
      await insertTrialContents(tx, [
        {
          id,
          cropId: catalogue.crop.id,
          siteId: catalogue.site.id,
          state: 'draft',
          createdBy: authorId,
          content,
          varietyIds: new Map(
            content.entries.flatMap(({ varietyName }) => {
              const variety = varietyName === null ? undefined : catalogue.findVariety(varietyName);
              return variety === undefined ? [] : [[variety.name, variety.id] as const];
            }),
          ),
          traitIds: new Map(catalogue.traits.map((trait) => [trait.slug, trait.id])),
        },
      ]);
      const detail = { rows: report.rows, plots: report.plots, entries: report.entries };
      await recordAuditEvent(tx, {
        actorId: authorId,
        action: 'trial.imported',
        subjectKind: 'trial',
        subjectId: id,
        detail,
      });
    });
  } catch (error) {
    if (isUniqueViolation(error)) throw new CodedError('trial-exists', { cause: error });
    throw error;
  }
  return id;
}

/** The problems of a file in the form of a refused request: the row and column are the path. */
function refusal({ problems, problemsTotal }: ImportReport): ConstructorParameters<typeof CodedError>[1] {
  return {
    values: { count: problemsTotal },
    issues: problems.map(({ row, column, reason, value }) => ({
      path: column === null ? String(row) : `${row}.${column}`,
      reason,
      ...(value !== null && { message: value }),
    })),
  };
}

/** The unit in which the file states yield, when it is to be brought to t/ha. */
function findYieldUnit(file: ReadFile, request: ImportRequest, catalogue: ImportCatalogue): YieldUnit | null {
  const storesTonnes = catalogue.traits.some((trait) => trait.slug === 'yield' && trait.unit === 't/ha');
  if (!storesTonnes) return null;
  return request.unit === 'as-stored' ? file.statedUnit : request.unit;
}

/** A unit that is not what was said makes every figure wrong by a factor, so the file is refused whole. */
function findUnitProblem(
  file: ReadFile,
  request: ImportRequest,
  catalogue: ImportCatalogue,
): RowProblem | null {
  const problem = (reason: ProblemReason, values: RowProblem['values']): RowProblem => ({
    row: 1,
    column: 'yield',
    value: null,
    reason,
    values,
  });
  const yields = file.plots.flatMap((plot) => plot.values['yield'] ?? []);
  const unit = findYieldUnit(file, request, catalogue);
  const isTonnes = catalogue.traits.some((trait) => trait.slug === 'yield' && trait.unit === 't/ha');
  if (yields.length === 0 || !isTonnes) return null;
  if (unit !== null && file.statedUnit !== null && unit !== file.statedUnit)
    return problem('unit-contradicts', { chosen: unit, stated: file.statedUnit });
  const { bushelWeightLb, typicalYield } = catalogue.crop;
  const middle = yields.toSorted((a, b) => a - b)[Math.floor(yields.length / 2)] ?? 0;
  const median = toTonnesPerHectare(middle, unit ?? 't/ha', bushelWeightLb);
  const share = median / typicalYield;
  if (share === 0 || (share >= doubtfulShares.low && share <= doubtfulShares.high)) return null;
  return problem('unit-doubtful', { median, typical: typicalYield });
}

function writeContent(file: ReadFile, request: ImportRequest, catalogue: ImportCatalogue): TrialContent {
  const unit = findYieldUnit(file, request, catalogue);
  const labelOf = (name: string): string => catalogue.findVariety(name)?.name ?? name;
  const checks = new Set(file.plots.filter((plot) => plot.isCheck).map((plot) => labelOf(plot.entry)));
  const labels = [...new Set(file.plots.map((plot) => labelOf(plot.entry)))].sort();
  return {
    format: 1,
    cropSlug: catalogue.crop.slug,
    siteSlug: catalogue.site.slug,
    season: request.season,
    name: request.name,
    design: request.design,
    kind: 'plots',
    alpha: 0.05,
    management: {},
    sownOn: null,
    harvestedOn: null,
    entries: labels.map((label) => {
      const variety = catalogue.findVariety(label);
      const isCheck = checks.has(label) || (variety?.isCheck ?? false);
      return { label, varietyName: variety?.name ?? null, isCheck };
    }),
    plots: file.plots.map((plot) => writePlot(plot, labelOf(plot.entry), unit, catalogue)),
    summary: [],
  };
}

function writePlot(
  { isCheck: _, ...plot }: ReadPlot,
  entry: string,
  unit: YieldUnit | null,
  { crop }: ImportCatalogue,
): TrialContent['plots'][number] {
  const measured = plot.values['yield'];
  const values =
    unit === null || measured === undefined
      ? plot.values
      : { ...plot.values, yield: toTonnesPerHectare(measured, unit, crop.bushelWeightLb) };
  return { ...plot, entry, excludedReason: null, values };
}
