import { and, desc, eq } from 'drizzle-orm';
import { trialVersions } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import { trialContent } from '#shared/trial-content.ts';
import type { AnalysisQuery, TrialAnalysisView } from '#shared/trial.ts';
import { compute } from '#server/computing/compute.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { viewAnalysis, type ViewContext } from './analyse-content-view.ts';
import { loadTrialContent, readTrialSurroundings } from './trial-content-store.ts';

/**
 * The analysis of the newest publication of a trial, also after it was withdrawn.
 * @throws CodedError not-found when it was never published, trait-without-data when the crop has no such trait
 */
export async function readPublishedAnalysis(
  db: DatabaseOrTransaction,
  trialId: string,
  query: AnalysisQuery,
  signal?: AbortSignal,
): Promise<TrialAnalysisView> {
  const [version] = await db
    .select()
    .from(trialVersions)
    .where(and(eq(trialVersions.trialId, trialId), eq(trialVersions.action, 'publish')))
    .orderBy(desc(trialVersions.number))
    .limit(1);
  if (version === undefined) throw new CodedError('not-found');
  const { traits, createdBy, cvLimitPercent, plotIds } = await readTrialSurroundings(db, trialId);
  const trait = traits.find((one) => one.slug === query.trait);
  if (trait === undefined) throw new CodedError('trait-without-data');
  const context: ViewContext = {
    trialId,
    source: 'published',
    version: version.number,
    plotIds,
    cvLimitPercent,
    isSingleAuthor: createdBy !== null && createdBy === version.authorId,
  };
  return viewWhereFits([trialContent.parse(version.content), trait, query, context], signal);
}

/**
 * The analysis of the working copy of a trial.
 * @throws CodedError not-found, trait-without-data
 */
export async function readDraftAnalysis(
  db: DatabaseOrTransaction,
  trialId: string,
  query: AnalysisQuery,
  signal?: AbortSignal,
): Promise<TrialAnalysisView> {
  const stored = await loadTrialContent(db, trialId);
  const trait = stored.traits.find((one) => one.slug === query.trait);
  if (trait === undefined) throw new CodedError('trait-without-data');
  const context: ViewContext = {
    trialId,
    source: 'draft',
    version: null,
    plotIds: stored.plotIds,
    cvLimitPercent: stored.cvLimitPercent,
    isSingleAuthor: false,
  };
  return viewWhereFits([stored.content, trait, query, context], signal);
}

/** A trial of more plots keeps others waiting while it is analysed. */
const mostPlotsHere = 200;

/** Small trials are analysed on the spot, sooner than a thread is asked; large ones in a thread. */
async function viewWhereFits(
  input: Parameters<typeof viewAnalysis>,
  signal: AbortSignal | undefined,
): Promise<TrialAnalysisView> {
  const [content] = input;
  return content.plots.length > mostPlotsHere
    ? compute('viewAnalysis', input, signal)
    : viewAnalysis(...input);
}
