/**
 * What the evidence can answer for.
 * one-trial: that trial only. few: below what the method answers for. one-season: the season's sites from data, other
 * seasons by the usual variances. supported: with the usual variances. data-alone: plain REML would do.
 */
export type EvidenceTier = 'none' | 'one-trial' | 'few' | 'one-season' | 'supported' | 'data-alone';

export interface EvidenceCount {
  /** site-years of the side that stood in fewer */
  readonly siteYears: number;
  /** of the network that links the two */
  readonly environments: number;
  readonly sites: number;
  readonly seasons: number;
  readonly entries: number;
  readonly hasUsual: boolean;
}

/** Layouts from which plain REML with Kenward–Roger covers as it says: engine.md section 2. */
export function standsAlone({
  environments,
  sites,
  seasons,
  entries,
}: Omit<EvidenceCount, 'siteYears' | 'hasUsual'>): boolean {
  return sites >= 2 && seasons >= 2 && environments >= 10 && entries >= 5;
}

export function gradeEvidence(count: EvidenceCount): EvidenceTier {
  if (count.siteYears === 0) return 'none';
  if (count.siteYears < 2 || count.environments < 2) return 'one-trial';
  if (standsAlone(count)) return 'data-alone';
  if (!count.hasUsual) return 'few';
  return count.seasons < 2 ? 'one-season' : 'supported';
}

/** Whether a verdict beyond the trials themselves may be given. */
export function answersFor(tier: EvidenceTier): boolean {
  return tier === 'one-season' || tier === 'supported' || tier === 'data-alone';
}
