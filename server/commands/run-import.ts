import { readFileSync, statSync } from 'node:fs';
import { basename } from 'node:path';
import { parseArgs } from 'node:util';
import type { Database } from '#server/db.ts';
import { checkTrialFile, storeTrialFile, type ImportRequest } from '#server/trial-desk/import-trial-file.ts';
import { columnFields } from '#server/trial-desk/match-columns.ts';
import { publishTrial } from '#server/trials/publish-trial.ts';
import { CodedError } from '#shared/error-codes.ts';
import { importByteLimit, importFields, importRowLimit, type RowProblem } from '#shared/trial-desk.ts';
import { openCommandSentences } from './command-sentences.ts';

export const importUsage = `Takes a file of plots in as a trial, all of it or nothing.

  npm run trials:import -- FILE --crop SLUG --site SLUG --season YEAR --design DESIGN [options]

  --design     crd rcbd latin-square incomplete-blocks row-column split-plot factorial strips
  --trait      trait of the value column (default yield)
  --unit       unit of yield in the file: t/ha kg/ha q/ha bu/ac (default: what the header says, else t/ha)
  --name       tells trials of one crop, site and season apart (default: the name of the file)
  --factors    headers of the factors of a factorial, with commas between
  --publish    publishes at once, for the reason given
  ${columnFields.map((field) => `--${field}-column`).join(' ')}
               headers that hold these, where they are not the usual ones

DATABASE_URL names the database.`;

/** Where the command writes: results and refusals apart. */
export type Printer = { say: (line: string) => void; refuse: (line: string) => void };

type CommandLine = { file: string; request: ImportRequest; publish: string | null };

/**
 * Runs `trials:import`.
 * @param args what follows the command's name
 * @returns exit code: 0 when the trial is stored, 1 when nothing is
 */
export async function runImport(db: Database, args: readonly string[], print: Printer): Promise<number> {
  try {
    const asked = readCommandLine(args);
    if (statSync(asked.file).size > importByteLimit)
      throw new CodedError('import-too-large', { values: { limit: importRowLimit } });
    return await importFile(db, asked, print);
  } catch (error) {
    print.refuse(explainFailure(error));
    return 1;
  }
}

async function importFile(
  db: Database,
  { file, request, publish }: CommandLine,
  print: Printer,
): Promise<number> {
  const checked = await checkTrialFile(db, readFileSync(file), request, null);
  const { report } = checked;
  if (checked.content === null) {
    for (const line of sayProblems(report.problems)) print.refuse(line);
    print.refuse(`Problems: ${report.problemsTotal}. Nothing was stored.`);
    return 1;
  }
  // A trial that cannot be published is not kept as a draft either: the command does all of it or nothing.
  const { trialId, version } = await db.transaction(async (tx) => {
    const id = await storeTrialFile(tx, checked, null);
    if (publish === null) return { trialId: id, version: null };
    const publication = { trialId: id, authorId: null, reason: publish, revision: 1 };
    return { trialId: id, version: await publishTrial(tx, publication) };
  });
  const { rows, plots, entries, traits, unknownVarieties } = report;
  print.say(`Rows ${rows}, plots ${plots}, entries ${entries}, traits ${traits.join(', ')}.`);
  if (unknownVarieties.length > 0)
    print.say(`No varieties of the crop, so kept as plain entries: ${listShort(unknownVarieties)}.`);
  if (version !== null) print.say(`Published as version ${version}.`);
  print.say(`Trial ${trialId}`);
  return 0;
}

function listShort(names: readonly string[]): string {
  const most = 20;
  const more = names.length > most ? ` and ${names.length - most} more` : '';
  return names.slice(0, most).join(', ') + more;
}

/** A command line that cannot be understood. */
class UsageError extends Error {}

/** @throws UsageError saying which option is wrong */
function readCommandLine(args: readonly string[]): CommandLine {
  const text = { type: 'string' } as const;
  const own = { crop: text, site: text, season: text, design: text, trait: text, unit: text, name: text };
  const columnOptions = Object.fromEntries(columnFields.map((field) => [`${field}-column`, text]));
  const { values, positionals } = parseArgs({
    args: [...args],
    allowPositionals: true,
    options: { ...own, factors: text, publish: text, ...columnOptions },
  });
  const [file, ...others] = positionals;
  if (file === undefined || others.length > 0) throw new UsageError('One file is expected.');
  const fields = importFields.safeParse({ name: basename(file), ...values });
  if (!fields.success) {
    const wrong = fields.error.issues.map((issue) => `--${issue.path.join('.')}: ${issue.message}`);
    throw new UsageError(wrong.join('\n'));
  }
  const given = new Map<string, string>(Object.entries(values));
  const columns = Object.fromEntries(
    columnFields.flatMap((field) => {
      const header = given.get(`${field}-column`);
      return header === undefined ? [] : [[field, header]];
    }),
  );
  const factors = given
    .get('factors')
    ?.split(',')
    .map((name) => name.trim());
  return {
    file,
    request: { ...fields.data, columns, ...(factors && { factors }) },
    publish: given.get('publish') ?? null,
  };
}

/** A line for each problem: where, what was found, what was expected. */
function sayProblems(problems: readonly RowProblem[]): string[] {
  const { t } = openCommandSentences();
  return problems.map(({ row, column, value, reason, values }) => {
    const where = column === null ? `line ${row}` : `line ${row}, ${column}`;
    const found = value === null || value === '' ? '' : `“${value}”. `;
    return `${where}: ${found}${t(`problems:${reason}`, values)}`;
  });
}

function explainFailure(error: unknown): string {
  if (error instanceof UsageError) return `${error.message}\n\n${importUsage}`;
  if (!(error instanceof CodedError)) return error instanceof Error ? error.message : String(error);
  const { t } = openCommandSentences();
  const limit = error.values?.['limit'];
  return [
    t(`errors:${error.code}`),
    ...(error.issues?.map((issue) => `--${issue.path}: not known here`) ?? []),
    ...(limit === undefined ? [] : [`At most ${limit} rows.`]),
  ].join('\n');
}
