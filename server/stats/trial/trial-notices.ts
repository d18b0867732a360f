import type { FixedFit } from './fixed-fit.ts';
import { isEstimable, type MeanFamily } from './mean-family.ts';
import type { TrialNotice } from './trial-result.ts';
import { confoundedTerms } from './variance-table.ts';

/** What cannot be estimated or tested, and why. */
export function noticeGaps(fit: FixedFit, family: MeanFamily, missing: readonly string[]): TrialNotice[] {
  const notices: TrialNotice[] = [];
  if (fit.residualDf === 0) notices.push({ code: 'no-residual-df' });
  if (fit.isExact) notices.push({ code: 'zero-residual-variance' });
  if (missing.length > 0) notices.push({ code: 'entry-without-data', entries: missing });
  const terms = confoundedTerms(fit).map((term) => term.name);
  if (terms.length > 0) notices.push({ code: 'term-confounded', terms });
  const parts = connectedParts(family);
  if (parts.length > 1) notices.push({ code: 'disconnected', parts });
  const entries = family.labels.filter((_, i) => !isEstimable(family, i, null));
  if (entries.length > 0) notices.push({ code: 'means-not-estimable', entries });
  return notices;
}

/** Sets of entries within which every gap is estimable. */
export function connectedParts(family: MeanFamily): string[][] {
  if (family.nullValues.length === 0) return [[...family.labels]];
  const parts: number[][] = [];
  for (let i = 0; i < family.labels.length; i++) {
    const part = parts.find((members) => isEstimable(family, members[0]!, i));
    if (part) part.push(i);
    else parts.push([i]);
  }
  return parts.map((part) => part.map((i) => family.labels[i]!));
}
