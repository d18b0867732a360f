import type { TrialAnalysis } from '#server/stats/engine.ts';
import { makeCaution, type Caution } from '#shared/caution.ts';
import type { SpatialModelView } from '#shared/trial.ts';

/** A check of residuals looks at every trial there is: at 5 % one sound trial in twenty would be called odd. */
export const residualLevel = 0.01;

/** Whether what is left drifts across the field. Three looks at one field: Bonferroni keeps the level. */
export function hasFieldTrend(checks: TrialAnalysis['checks']): boolean {
  const field = [checks?.rowTrend, checks?.colTrend, checks?.moran].flatMap((test) => test?.p ?? []);
  return field.some((p) => p * field.length < residualLevel);
}

/**
 * The design's model and those of a trend, side by side; empty where there are none to set beside it.
 * @param better the end of the trait from which ranks are counted
 */
export function viewSpatial(
  spatial: TrialAnalysis['spatial'],
  alpha: number,
  better: 'higher' | 'lower',
): SpatialModelView[] {
  if (spatial === null || spatial.models.length < 2) return [];
  return spatial.models.map(({ code, aic, residualMs, lsd, means }) => ({
    code,
    aic,
    residualMs,
    lsd: lsd[String(alpha)]?.mean ?? null,
    means: means
      .flatMap(({ entry, mean }) => (mean === null ? [] : [{ entry, mean }]))
      .toSorted((a, b) => (better === 'lower' ? a.mean - b.mean : b.mean - a.mean))
      .map((row, place) => ({ ...row, rank: place + 1 })),
  }));
}

/**
 * Says that the field drifts and, where a model that follows the trend fits better than the design's, what it does to
 * the LSD and to the entry that moves most. The LSD of yield is told in t/ha, those of other traits as a share.
 */
export function cautionTrend(models: readonly SpatialModelView[], isYield: boolean): Caution {
  const [design, ...others] = models;
  const best = others.toSorted((a, b) => a.aic - b.aic)[0];
  if (design === undefined || best === undefined) return makeCaution('spatial-trend', 'warning', {});
  if (best.aic >= design.aic) return makeCaution('spatial-trend', 'warning', { context: 'no-better' });
  // The LSD of AR1 takes its correlations as known and is too small: it is shown with that remark, not quoted alone.
  if (design.lsd === null || best.lsd === null || best.code === 'autoregressive')
    return makeCaution('spatial-trend', 'warning', { context: 'beside' });
  const mover = findMover(design, best);
  return makeCaution('spatial-trend', 'warning', {
    context: `${isYield ? 'yield' : 'share'}${mover === null ? '' : '-moved'}`,
    ...(isYield ? { lsd: best.lsd, usual: design.lsd } : { share: (100 * best.lsd) / design.lsd }),
    ...mover,
  });
}

/** The entry that changes most places between two models; null where none does. */
function findMover(
  design: SpatialModelView,
  other: SpatialModelView,
): { variety: string; from: number; to: number } | null {
  const places = new Map(other.means.map(({ entry, rank }) => [entry, rank]));
  const [first] = design.means
    .map(({ entry, rank }) => ({ variety: entry, from: rank, to: places.get(entry) ?? rank }))
    .toSorted((a, b) => Math.abs(b.to - b.from) - Math.abs(a.to - a.from));
  return first === undefined || first.from === first.to ? null : first;
}
