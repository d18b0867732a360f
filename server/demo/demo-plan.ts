import { demoCrops, type DemoCrop, type DemoVariety } from './demo-crops.ts';
import type { CropSlug } from './demo-settings.ts';
import type { Layout } from './lay-out-trial.ts';
import { openRandomSource } from './random-source.ts';

/** What makes a trial of the demo worth showing. */
export type Incident =
  /** Hail thinned the plots unevenly: a CV far above the crop's limit. */
  | 'hail'
  /** Fertility drifts along the rows of plots. */
  | 'spatial-trend'
  /** A plot's decimal comma was lost in typing; left for the agronomist to find. */
  | 'lost-comma'
  /** A plot left out with its reason. */
  | 'excluded-plot'
  /** Published with two plots swapped, then corrected. */
  | 'corrected'
  | 'withdrawn';

export type PlannedTrial = {
  crop: CropSlug;
  site: string;
  season: number;
  /** Tells the trials of a site and season apart; what is drawn for a trial hangs on it. */
  name: string;
  /** As shown, in both languages. */
  title: string;
  kind: 'plots' | 'summary';
  layout: Layout;
  incident: Incident | null;
  hasMissingPlots: boolean;
  state: 'draft' | 'in-review' | 'published' | 'withdrawn';
  /** Published by the one who brought it in. */
  isSingleAuthor: boolean;
  fungicide: boolean;
};

const seasons = [2022, 2023, 2024, 2025, 2026] as const;

/** Sites of a crop by season: an offset walks through them, so that not every site has every season. */
const rotation: Record<CropSlug, { sites: readonly string[]; perSeason: number }> = {
  'spring-barley': {
    sites: ['haverlin', 'saint-orme', 'brasque', 'corbeval', 'dastelle', 'orlaine-mesnil', 'tessick-hill'],
    perSeason: 6,
  },
  'winter-wheat': {
    sites: ['marrowfen', 'saint-orme', 'tessick-hill', 'kessering-flat', 'dastelle', 'haverlin'],
    perSeason: 4,
  },
  'field-pea': {
    sites: ['saint-orme', 'kessering-flat', 'tessick-hill', 'marrowfen', 'brasque'],
    perSeason: 3,
  },
};

/** Designs in the order in which they come round; complete blocks are the habit of the trade. */
const designCycle: readonly { design: Layout['design']; reps: number }[] = [
  { design: 'rcbd', reps: 4 },
  { design: 'rcbd', reps: 3 },
  { design: 'incomplete-blocks', reps: 3 },
  { design: 'rcbd', reps: 4 },
  { design: 'rcbd', reps: 4 },
  { design: 'row-column', reps: 3 },
  { design: 'rcbd', reps: 3 },
  { design: 'incomplete-blocks', reps: 4 },
  { design: 'rcbd', reps: 4 },
  { design: 'crd', reps: 4 },
  { design: 'rcbd', reps: 4 },
  { design: 'rcbd', reps: 3 },
  { design: 'incomplete-blocks', reps: 3 },
];

type Key = `${CropSlug} ${string} ${number}`;

const incidents: Partial<Record<Key, Incident>> = {
  'spring-barley orlaine-mesnil 2024': 'hail',
  'winter-wheat marrowfen 2025': 'spatial-trend',
  'spring-barley haverlin 2025': 'corrected',
  'spring-barley dastelle 2023': 'withdrawn',
  'field-pea saint-orme 2024': 'excluded-plot',
  'winter-wheat tessick-hill 2023': 'excluded-plot',
};

/** Every fifth trial of the walk is known from a published table alone. */
const summaryStep = 5;

/** All trials of the demo, in the order in which they were sown. */
export function planDemo(): PlannedTrial[] {
  const regular = demoCrops.flatMap((crop) =>
    seasons.flatMap((season) => sitesOf(crop.slug, season).map((site) => ({ crop, season, site }))),
  );
  const planned = regular.map(({ crop, season, site }, i): PlannedTrial => {
    const incident = incidents[`${crop.slug} ${site} ${season}`] ?? null;
    const kind = i % summaryStep === summaryStep - 1 && incident === null ? 'summary' : 'plots';
    const cycled = designCycle[i % designCycle.length] ?? { design: 'rcbd', reps: 4 };
    const habit = kind === 'summary' || incident !== null ? ({ design: 'rcbd', reps: 4 } as const) : cycled;
    return {
      crop: crop.slug,
      site,
      season,
      name: 'Variety trial',
      title: 'Variety trial / Essai variétal',
      kind,
      layout: { ...habit, ...chooseEntries(crop, season, habit.design, `${crop.slug} ${site} ${season}`) },
      incident,
      hasMissingPlots: kind === 'plots' && i % 4 === 1,
      state: incident === 'withdrawn' ? 'withdrawn' : 'published',
      isSingleAuthor: i % 11 === 3,
      fungicide: crop.slug === 'winter-wheat' && i % 2 === 0,
    };
  });
  return [...planned, ...planStrips(), ...planSplitPlots(), ...planOpenTrials()].sort(
    (a, b) => a.season - b.season,
  );
}

function sitesOf(crop: CropSlug, season: number): string[] {
  const { sites, perSeason } = rotation[crop];
  const start = (season - 2022) * (sites.length - perSeason);
  return Array.from({ length: perSeason }, (_, i) => sites[(start + i) % sites.length] ?? '');
}

/** The varieties that stand in trials in a season, as many as the design can hold; checks stand everywhere. */
function chooseEntries(
  crop: DemoCrop,
  season: number,
  design: Layout['design'],
  label: string,
): Pick<Layout, 'entries' | 'blockSize'> {
  const sown = crop.varieties.filter((variety) => isSown(variety, season));
  const checks = sown.filter((variety) => variety.isCheck);
  const others = openRandomSource(0, `entries ${label}`).shuffle(sown.filter((variety) => !variety.isCheck));
  const inGrid = design === 'incomplete-blocks' || design === 'row-column';
  const blockSize = inGrid ? (sown.length >= 12 ? 4 : 3) : undefined;
  const wanted = blockSize === undefined ? Math.max(sown.length - 1, 8) : blockSize * 3;
  const entries = [...checks, ...others].slice(0, wanted).map((variety) => variety.name);
  return blockSize === undefined ? { entries } : { entries, blockSize };
}

function isSown(variety: DemoVariety, season: number): boolean {
  return variety.from <= season && (variety.to === null || season <= variety.to);
}

const special = {
  kind: 'plots',
  incident: null,
  hasMissingPlots: false,
  state: 'published',
  isSingleAuthor: false,
  fungicide: false,
} as const;

/** Two entries side by side through a grower's field, six times. */
function planStrips(): PlannedTrial[] {
  const pairs = [
    ['spring-barley', 'corbeval', 2025, 'Tamberlow', 'Marrasby'],
    ['spring-barley', 'tessick-hill', 2026, 'Tamberlow', 'Ilvane'],
    ['field-pea', 'dastelle', 2025, 'Brindle', 'Torrel'],
    ['field-pea', 'dastelle', 2026, 'Brindle', 'Tallis'],
    ['winter-wheat', 'dastelle', 2025, 'Aldermoss', 'Isselton'],
    ['winter-wheat', 'marrowfen', 2026, 'Aldermoss', 'Brackendre'],
  ] as const;
  return pairs.map(([crop, site, season, current, candidate]) => ({
    ...special,
    crop,
    site,
    season,
    name: 'On-farm strips',
    title: 'On-farm strips / Bandes à la ferme',
    layout: { design: 'strips', entries: [current, candidate], reps: 6 },
  }));
}

function planSplitPlots(): PlannedTrial[] {
  const places = [
    ['winter-wheat', 'saint-orme', 2025],
    ['spring-barley', 'saint-orme', 2026],
  ] as const;
  return places.map(([crop, site, season]) => {
    const entries = (demoCrops.find((one) => one.slug === crop)?.varieties ?? [])
      .filter((variety) => isSown(variety, season))
      .slice(0, 6)
      .map((variety) => variety.name);
    return {
      ...special,
      crop,
      site,
      season,
      name: 'Fungicide × variety',
      title: 'Fungicide × variety / Fongicide × variété',
      layout: { design: 'split-plot', entries, reps: 4, mainLevels: ['untreated', 'treated'] },
      fungicide: true,
    };
  });
}

/** Trials still on the desk: one to check, two to finish. */
function planOpenTrials(): PlannedTrial[] {
  const open = [
    ['spring-barley', 'haverlin', 'draft', 'lost-comma'],
    ['field-pea', 'tessick-hill', 'in-review', null],
    ['winter-wheat', 'kessering-flat', 'in-review', null],
  ] as const;
  return open.map(([cropSlug, site, state, incident]) => {
    const crop = demoCrops.find((one) => one.slug === cropSlug);
    if (crop === undefined) throw new Error(`No crop ${cropSlug} in the demo`);
    return {
      ...special,
      crop: cropSlug,
      site,
      season: 2026,
      name: 'Late sowing',
      title: 'Late sowing / Semis tardif',
      layout: { design: 'rcbd', reps: 4, ...chooseEntries(crop, 2026, 'rcbd', `late ${cropSlug}`) },
      incident,
      state,
    };
  });
}
