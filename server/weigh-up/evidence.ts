import type { BilingualName, Trait } from '#shared/catalogue.ts';
import type { SitePlace } from './farm-place.ts';

/** A published trial of the crop and seasons asked for, in a region asked for or near the farm, under the version that counts now. */
export type EvidenceTrial = {
  trialId: string;
  versionId: string;
  version: number;
  sha256: string;
  name: string;
  siteId: string;
  siteName: string;
  /** Where the site lies and what grows there. */
  place: SitePlace;
  regionId: string;
  regionName: BilingualName;
  /** False where the site lies in another region than the question's. */
  inRegion: boolean;
  season: number;
  kind: 'plots' | 'summary';
  isStrips: boolean;
  /** Whether the crop stood with fungicide or irrigation, as far as it was said. */
  management: Record<string, string | number | boolean>;
};

/** The fit of one trait in one version. */
export type EvidenceFit = {
  versionId: string;
  traitId: string;
  grandMean: number;
  residualMs: number | null;
  residualDf: number | null;
  cvPercent: number | null;
  entryP: number | null;
};

/** The adjusted mean of a variety in one version and trait, in the trait's unit. */
export type EvidenceMean = {
  versionId: string;
  traitId: string;
  varietyId: string;
  mean: number;
  /** Half the mean variance of the entry's differences; null where the trial has no error or the trait is a rating. */
  variance: number | null;
  df: number | null;
};

export type EvidenceVariety = { id: string; name: string; isCheck: boolean };

/** Usual variances of a trait from the organisation's own trials, in the trait's unit squared. */
export type EvidenceUsual = {
  id: string;
  traitId: string;
  site: number;
  season: number;
  rest: number;
  estimatedAt: Date;
};

/** Which evidence a question rests on: small, and read afresh each time, to know whether an answer still holds. */
export type EvidenceGround = {
  crop: { id: string; cvLimitPercent: number; typicalYield: number };
  traits: Trait[];
  varieties: EvidenceVariety[];
  trials: EvidenceTrial[];
  usual: EvidenceUsual[];
};

/** Everything that a question is answered from. */
export type Evidence = EvidenceGround & {
  fits: EvidenceFit[];
  means: EvidenceMean[];
};
