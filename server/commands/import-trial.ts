import { readFileSync, statSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { connectDatabase } from '#server/db.ts';
import { checkTrialFile, storeTrialFile, type ImportRequest } from '#server/trial-desk/import-trial-file.ts';
import { columnFields } from '#server/trial-desk/match-columns.ts';
import { publishTrial } from '#server/trials/publish-trial.ts';
import { CodedError } from '#shared/error-codes.ts';
import { importByteLimit, importFields, type ImportReport, type RowProblem } from '#shared/trial-desk.ts';
import errorSentences from '#locales/en/errors.json' with { type: 'json' };
import problemSentences from '#locales/en/problems.json' with { type: 'json' };

const usage = `Takes a file of plots in as a trial, all of it or nothing.

  npm run trials:import -- FILE --crop SLUG --site SLUG --season YEAR --design DESIGN [options]

  --design     crd rcbd latin-square incomplete-blocks row-column split-plot factorial strips
  --trait      trait of the value column (default yield)
  --unit       unit of yield in the file: t/ha kg/ha q/ha bu/ac (default: as the crop stores it)
  --name       tells trials of one crop, site and season apart (default: the file's name)
  --factors    headers of the factors of a factorial, with commas between
  --publish    publishes at once, for the reason given
  ${columnFields.map((field) => `--${field}-column`).join(' ')}
               headers that hold these, where they are not the usual ones

DATABASE_URL names the database; unset, it is the one of npm start.`;

const columnOptions = Object.fromEntries(
  columnFields.map((field) => [`${field}-column`, { type: 'string' as const }]),
);

/** What the command line asks for; null when it cannot be understood. */
function readCommandLine(): { file: string; request: ImportRequest; publish: string | null } | null {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      crop: { type: 'string' },
      site: { type: 'string' },
      season: { type: 'string' },
      design: { type: 'string' },
      trait: { type: 'string' },
      unit: { type: 'string' },
      name: { type: 'string' },
      factors: { type: 'string' },
      publish: { type: 'string' },
      ...columnOptions,
    },
  });
  const [file] = positionals;
  if (file === undefined || positionals.length > 1) return null;
  const named: Record<string, unknown> = values;
  const fields = importFields.safeParse({ name: file.replace(/^.*\//, ''), ...values });
  if (!fields.success) {
    for (const issue of fields.error.issues) console.error(`--${issue.path.join('.')}: ${issue.message}`);
    return null;
  }
  const columns: Record<string, string> = {};
  for (const field of columnFields) {
    const header = named[`${field}-column`];
    if (typeof header === 'string') columns[field] = header;
  }
  const factors = values.factors?.split(',').map((name) => name.trim());
  return {
    file,
    request: { ...fields.data, columns, ...(factors && { factors }) },
    publish: values.publish ?? null,
  };
}

/** Sentence of a problem with its values put in. */
function sayProblem({ row, column, value, reason, values }: RowProblem): string {
  const sentences: Record<string, string> = problemSentences;
  const sentence = (sentences[reason] ?? reason).replace(/\{\{(\w+)\}\}/g, (_, name: string) =>
    String(values[name] ?? ''),
  );
  const where = column === null ? `line ${row}` : `line ${row}, ${column}`;
  return value === null || value === '' ? `${where}: ${sentence}` : `${where}: “${value}”. ${sentence}`;
}

function printReport(report: ImportReport): void {
  console.log(
    `${report.rows} rows, ${report.plots} plots, ${report.entries} entries, traits: ${report.traits.join(', ')}`,
  );
  if (report.unknownVarieties.length > 0)
    console.log(`No variety of the crop, stored as labels: ${report.unknownVarieties.join(', ')}`);
}

async function main(): Promise<number> {
  const url = process.env['DATABASE_URL'];
  const asked = readCommandLine();
  if (asked === null || url === undefined) {
    console.error(url === undefined ? 'DATABASE_URL is not set.' : usage);
    return 1;
  }
  const { file, request, publish } = asked;
  if (statSync(file).size > importByteLimit) {
    console.error(errorSentences['import-too-large']);
    return 1;
  }
  const { db, close } = connectDatabase(url, (error) => console.error(error.message));
  try {
    const checked = await checkTrialFile(db, readFileSync(file), request, null);
    if (checked.content === null) {
      for (const problem of checked.report.problems) console.error(sayProblem(problem));
      console.error(`${checked.report.problemsTotal} problems; nothing was stored.`);
      return 1;
    }
    const trialId = await storeTrialFile(db, checked, null);
    printReport(checked.report);
    if (publish !== null) {
      const version = await publishTrial(db, { trialId, authorId: null, reason: publish, revision: 1 });
      console.log(`Published as version ${version}.`);
    }
    console.log(`Trial ${trialId}`);
    return 0;
  } finally {
    await close();
  }
}

try {
  process.exitCode = await main();
} catch (error) {
  if (error instanceof CodedError) {
    const issues = error.issues?.map((issue) => `--${issue.path}: unknown`) ?? [];
    console.error([errorSentences[error.code], ...issues].join('\n'));
  } else console.error(error instanceof Error ? error.message : error);
  process.exitCode = 1;
}
