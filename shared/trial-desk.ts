import { z } from 'zod';
import { defineContract } from './contract.ts';
import { trialAnalysis, trialDesign, trialDetail, trialFilter, trialLine, trialState } from './trial.ts';

/** Most rows one file may hold; a larger file is refused whole, with this number in the message. */
export const importRowLimit = 50_000;
/** Bytes; multer stops reading there. */
export const importByteLimit = 16 * 1024 * 1024;

/** Form fields that travel with an uploaded file. Columns default to the usual names. */
export const importFields = z.object({
  crop: z.string().min(1).max(80),
  site: z.string().min(1).max(80),
  season: z.coerce.number().int().min(1900).max(2200),
  design: trialDesign,
  name: z.string().trim().min(1).max(120),
  /** Trait of a file with one value column; a file with a trait column names its own. */
  trait: z.string().min(1).max(80).default('yield'),
  /** Unit of the value column for yield; brought to t/ha. */
  unit: z.enum(['t/ha', 'kg/ha', 'q/ha', 'bu/ac', 'as-stored']).default('as-stored'),
});
export type ImportFields = z.infer<typeof importFields>;

export const rowProblem = z.object({
  /** Line of the file, the header being 1. */
  row: z.number().int(),
  column: z.string().nullable(),
  value: z.string().nullable(),
  /** `desk:problems.<reason>` says what was expected. */
  reason: z.string(),
  values: z.record(z.string(), z.union([z.string(), z.number()])).default({}),
});
export type RowProblem = z.infer<typeof rowProblem>;

export const importReport = z.object({
  rows: z.number().int(),
  plots: z.number().int(),
  entries: z.number().int(),
  traits: z.array(z.string()),
  /** Names in the file that are no variety of the crop: stored as labels, not joined to other trials. */
  unknownVarieties: z.array(z.string()),
  problems: z.array(rowProblem),
  problemsTotal: z.number().int(),
});
export type ImportReport = z.infer<typeof importReport>;

const trialParams = z.object({ trialId: z.uuid() });
const reason = z.string().trim().min(3).max(500);

export const listDeskTrials = defineContract({
  method: 'GET',
  path: '/api/desk/trials',
  access: ['agronomist'],
  query: trialFilter.extend({ state: trialState.optional() }),
  reply: z.object({ trials: z.array(trialLine) }),
});

/** Reads the file and says what is wrong with it; stores nothing. */
export const checkImport = defineContract({
  method: 'POST',
  path: '/api/desk/import-checks',
  access: ['agronomist'],
  upload: 'file',
  body: importFields,
  reply: z.object({ report: importReport, analysis: trialAnalysis.nullable() }),
});

/** Stores the whole file as a draft, or nothing (`import-refused` with the problems as issues). */
export const importTrial = defineContract({
  method: 'POST',
  path: '/api/desk/imports',
  access: ['agronomist'],
  upload: 'file',
  body: importFields,
  reply: z.object({ trialId: z.uuid(), report: importReport }),
});

export const readDeskTrial = defineContract({
  method: 'GET',
  path: '/api/desk/trials/:trialId',
  access: ['agronomist'],
  params: trialParams,
  reply: z.object({ trial: trialDetail }),
});

/** Of the working copy at the desk, published or not. */
export const readDeskAnalysis = defineContract({
  method: 'GET',
  path: '/api/desk/trials/:trialId/analysis',
  access: ['agronomist'],
  params: trialParams,
  query: z.object({ trait: z.string().max(80).default('yield') }),
  reply: z.object({ analysis: trialAnalysis }),
});

/** Leaves plots out, or takes them back in (reason null), in the working copy. */
export const excludePlots = defineContract({
  method: 'PATCH',
  path: '/api/desk/trials/:trialId/plots',
  access: ['agronomist'],
  params: trialParams,
  body: z.object({
    revision: z.number().int(),
    plotIds: z.array(z.uuid()).min(1).max(2000),
    reason: reason.nullable(),
  }),
  reply: z.object({ trial: trialDetail }),
});

export const publishTrial = defineContract({
  method: 'POST',
  path: '/api/desk/trials/:trialId/publications',
  access: ['agronomist'],
  params: trialParams,
  body: z.object({ revision: z.number().int(), reason }),
  reply: z.object({ trial: trialDetail }),
});

export const withdrawTrial = defineContract({
  method: 'POST',
  path: '/api/desk/trials/:trialId/withdrawals',
  access: ['agronomist'],
  params: trialParams,
  body: z.object({ revision: z.number().int(), reason }),
  reply: z.object({ trial: trialDetail }),
});
