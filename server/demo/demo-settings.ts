/** The seed of every figure of the demo: the same seed gives the same fields. */
export const demoSeed = 20_260_314;

export type CropSlug = 'spring-barley' | 'field-pea' | 'winter-wheat';

/** Standard deviations of yield at standard moisture, t/ha, and the mean they lie around. */
export type YieldComponents = {
  mean: number;
  /** Between varieties of the crop, besides what breeding gains. */
  variety: number;
  /** What a year of breeding adds: newer varieties are better on average. */
  gainPerYear: number;
  varietySite: number;
  varietyYear: number;
  /** Variety × site × year: what is left of an entry in one trial. */
  rest: number;
  plot: number;
  /** Between sites, between seasons, and between trials of a site and season. */
  site: number;
  year: number;
  trial: number;
  /** Between blocks of a trial. */
  block: number;
};

/** The truth behind the demo. Barley as in the scenario; pea and wheat in proportion to their means. */
export const yieldComponents: Readonly<Record<CropSlug, YieldComponents>> = {
  'spring-barley': {
    mean: 5.2,
    variety: 0.3,
    gainPerYear: 0.03,
    varietySite: 0.12,
    varietyYear: 0.12,
    rest: 0.18,
    plot: 0.3,
    site: 0.45,
    year: 0.4,
    trial: 0.3,
    block: 0.2,
  },
  'field-pea': {
    mean: 2.9,
    variety: 0.17,
    gainPerYear: 0.018,
    varietySite: 0.07,
    varietyYear: 0.07,
    rest: 0.1,
    plot: 0.19,
    site: 0.28,
    year: 0.25,
    trial: 0.18,
    block: 0.12,
  },
  'winter-wheat': {
    mean: 6.4,
    variety: 0.36,
    gainPerYear: 0.06,
    varietySite: 0.15,
    varietyYear: 0.15,
    rest: 0.22,
    plot: 0.36,
    site: 0.55,
    year: 0.5,
    trial: 0.35,
    block: 0.25,
  },
};

/** Standard deviation of the plots that hail went over, percent of their mean: the field as drawn comes out at a CV of 28. */
export const hailCvPercent = 26.5;
/** Height of the drift along the rows of plots in the trial with a strong spatial trend, in plot standard deviations. */
export const spatialDrift = 4.2;
/** Share of plots without a yield in the trials that have some. */
export const missingShare = 0.04;
