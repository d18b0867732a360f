import { randomUUID } from 'node:crypto';
import type { Router } from 'express';
import { CodedError } from '#shared/error-codes.ts';
import * as desk from '#shared/trial-desk.ts';
import type { TrialAnalysisView } from '#shared/trial.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { readDraftAnalysis } from '#server/trials/analyse-content-store.ts';
import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import { publishTrial, withdrawTrial } from '#server/trials/publish-trial.ts';
import { checkTrialFile, storeTrialFile, type CheckedImport } from './import-trial-file.ts';
import { excludePlots, listDeskTrials, readDeskTrial, requireDeskTrial } from './trial-desk-store.ts';

/** The trial desk: an agronomist works on the trials of the regions of the account, and on no others. */
export function addTrialDeskRoutes(router: Router, db: Database): void {
  addReadingRoutes(router, db);
  addImportRoutes(router, db);
  addChangingRoutes(router, db);
}

function addReadingRoutes(router: Router, db: Database): void {
  route(router, desk.listDeskTrials, async ({ me, query }) => ({
    trials: await listDeskTrials(db, requireMe(me), query),
  }));
  route(router, desk.readDeskTrial, async ({ me, params }) => ({
    trial: await readDeskTrial(db, requireMe(me), params.trialId),
  }));
  route(router, desk.readDeskAnalysis, async ({ me, params, query }) => {
    await requireDeskTrial(db, requireMe(me), params.trialId);
    const question = { trait: query.trait, comparison: 'lsd', view: 'analysis' } as const;
    return { analysis: await readDraftAnalysis(db, params.trialId, question) };
  });
}

function addImportRoutes(router: Router, db: Database): void {
  route(router, desk.checkImport, async ({ me, body, file }) => {
    const checked = await checkTrialFile(db, requireFile(file), body, requireMe(me).regionIds);
    return { report: checked.report, analysis: previewAnalysis(checked, body.trait) };
  });
  route(router, desk.importTrial, async ({ me, body, file }) => {
    const worker = requireMe(me);
    const checked = await checkTrialFile(db, requireFile(file), body, worker.regionIds);
    return { trialId: await storeTrialFile(db, checked, worker.id), report: checked.report };
  });
}

function addChangingRoutes(router: Router, db: Database): void {
  route(router, desk.excludePlots, async ({ me, params, body }) => {
    const worker = requireMe(me);
    await excludePlots(db, worker, { trialId: params.trialId, ...body });
    return { trial: await readDeskTrial(db, worker, params.trialId) };
  });
  route(router, desk.publishTrial, async ({ me, params, body }) => {
    const worker = requireMe(me);
    await requireDeskTrial(db, worker, params.trialId);
    await publishTrial(db, { trialId: params.trialId, authorId: worker.id, ...body });
    return { trial: await readDeskTrial(db, worker, params.trialId) };
  });
  route(router, desk.withdrawTrial, async ({ me, params, body }) => {
    const worker = requireMe(me);
    await requireDeskTrial(db, worker, params.trialId);
    await withdrawTrial(db, { trialId: params.trialId, authorId: worker.id, ...body });
    return { trial: await readDeskTrial(db, worker, params.trialId) };
  });
}

function requireFile(file: { bytes: Buffer } | null): Buffer {
  if (file === null)
    throw new CodedError('invalid-input', { issues: [{ path: 'file', reason: 'required' }] });
  return file.bytes;
}

/** The analysis that the file would have as a draft, under ids that lead nowhere; null where the file is refused. */
function previewAnalysis({ content, catalogue }: CheckedImport, traitSlug: string): TrialAnalysisView | null {
  const measured = new Set(content?.plots.flatMap((plot) => Object.keys(plot.values)) ?? []);
  const trait =
    catalogue.traits.find((one) => one.slug === traitSlug && measured.has(one.slug)) ??
    catalogue.traits.find((one) => measured.has(one.slug));
  if (content === null || trait === undefined) return null;
  const context = {
    trialId: randomUUID(),
    source: 'draft',
    version: null,
    plotIds: new Map(content.plots.map((plot) => [plot.plotNumber, randomUUID()])),
    cvLimitPercent: catalogue.crop.cvLimitPercent,
    isSingleAuthor: false,
  } as const;
  const scale = { scaleMin: trait.min, scaleMax: Number.isFinite(trait.max) ? trait.max : null };
  return viewAnalysis(content, { ...trait, ...scale }, { comparison: 'lsd', view: 'reading' }, context);
}
