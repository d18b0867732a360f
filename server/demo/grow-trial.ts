import type { TrialContent } from '#shared/trial-content.ts';
import type { DemoCrop, DemoTrait } from './demo-crops.ts';
import type { PlannedTrial } from './demo-plan.ts';
import { demoSeed, hailCvPercent, missingShare, spatialDrift, yieldComponents } from './demo-settings.ts';
import { drawEffect, type CropTruth, type VarietyEffects } from './demo-truth.ts';
import { layOutTrial, type LaidPlot } from './lay-out-trial.ts';
import { openRandomSource, type RandomSource } from './random-source.ts';
import { summariseGrown } from './summarise-grown.ts';

type PlotValues = { plot: LaidPlot; values: Record<string, number>; excludedReason: string | null };

/** Grows one planned trial: lays it out, gives every plot its values and writes it down as the desk would hold it. */
export function growTrial(planned: PlannedTrial, crop: DemoCrop, truth: CropTruth): TrialContent {
  const label = `${planned.crop} ${planned.site} ${planned.season} ${planned.name}`;
  const random = openRandomSource(demoSeed, label);
  const grown: PlotValues[] = layOutTrial(planned.layout, random).map((plot) => ({
    plot,
    values: {},
    excludedReason: null,
  }));
  growYield(grown, planned, effectsOf(truth, 'yield'), random);
  for (const trait of crop.traits) {
    if (trait.grown === null || random.uniform() >= trait.measured || planned.layout.design === 'strips')
      continue;
    growTrait(grown, trait, effectsOf(truth, trait.slug), label, random);
  }
  applyIncident(grown, planned);
  if (planned.hasMissingPlots) loseYields(grown, random);
  return writeContent(planned, crop, grown);
}

function effectsOf(truth: CropTruth, traitSlug: string): VarietyEffects {
  return truth.varieties.get(traitSlug) ?? new Map<string, number>();
}

/** Yield by the components of demo-settings: environment, variety and its interactions, blocks, plot. */
function growYield(
  grown: PlotValues[],
  planned: PlannedTrial,
  effects: VarietyEffects,
  random: RandomSource,
): void {
  const { crop, site, season, name, layout, incident } = planned;
  const part = yieldComponents[crop];
  const environment =
    part.mean +
    drawEffect(`${crop} site ${site}`, part.site) +
    drawEffect(`${crop} year ${season}`, part.year) +
    drawEffect(`${crop} trial ${site} ${season} ${name}`, part.trial);
  const level = incident === 'hail' ? environment * 0.62 : environment;
  const plotDeviation = incident === 'hail' ? (hailCvPercent / 100) * level : part.plot;
  const lift = drawEffect(`${crop} fungicide ${site} ${season}`, part.block) + part.variety;
  const groups = openGroupEffects(random);
  const rows = Math.max(...grown.map(({ plot }) => plot.row));
  const cols = Math.max(...grown.map(({ plot }) => plot.col));
  for (const { plot, values } of grown) {
    const entry =
      (effects.get(plot.entry) ?? 0) +
      drawEffect(`${crop} ${plot.entry} × ${site}`, part.varietySite) +
      drawEffect(`${crop} ${plot.entry} × ${season}`, part.varietyYear) +
      drawEffect(`${crop} ${plot.entry} × ${site} × ${season}`, part.rest);
    const ground =
      (layout.design === 'crd' ? 0 : groups(`rep ${plot.rep}`, part.block)) +
      (layout.design === 'incomplete-blocks' ? groups(`block ${plot.rep} ${plot.block}`, part.block) : 0) +
      (layout.design === 'row-column' ? groups(`row ${plot.row}`, part.block / 1.5) : 0) +
      (layout.design === 'row-column' ? groups(`col ${plot.rep} ${plot.col}`, part.block / 1.5) : 0) +
      (plot.mainLevel === null ? 0 : groups(`main ${plot.block} ${plot.mainLevel}`, part.block / 2)) +
      (incident === 'spatial-trend' ? drift(plot, rows, cols) * spatialDrift * part.plot : 0);
    const treated = plot.mainLevel === 'treated' ? lift : 0;
    const exact = level + entry + ground + treated + plotDeviation * random.normal();
    values['yield'] = round(Math.max(exact, 0.05), 3);
  }
}

/** A smooth rise along the columns with a hollow in it, between about −0.5 and 0.5. */
function drift(plot: LaidPlot, rows: number, cols: number): number {
  const across = cols === 1 ? 0.5 : (plot.col - 1) / (cols - 1);
  const along = rows === 1 ? 0.5 : (plot.row - 1) / (rows - 1);
  return across - 0.5 + 0.3 * Math.sin(2 * Math.PI * across) * (0.5 + along);
}

/** Effects of the groups of one trial, drawn when first met. */
function openGroupEffects(random: RandomSource): (group: string, deviation: number) => number {
  const drawn = new Map<string, number>();
  return (group, deviation) => {
    const known = drawn.get(group);
    if (known !== undefined) return known;
    const effect = deviation * random.normal();
    drawn.set(group, effect);
    return effect;
  };
}

function growTrait(
  grown: PlotValues[],
  trait: DemoTrait,
  effects: VarietyEffects,
  label: string,
  random: RandomSource,
): void {
  const part = trait.grown;
  if (part === null) return;
  const level = part.mean + drawEffect(`${label} ${trait.slug}`, part.trial);
  for (const { plot, values } of grown) {
    const entry =
      (effects.get(plot.entry) ?? 0) + drawEffect(`${label} ${trait.slug} ${plot.entry}`, part.variety / 3);
    const exact = level + entry + part.plot * random.normal();
    const kept = Math.min(Math.max(exact, trait.scaleMin ?? 0), trait.scaleMax ?? Number.POSITIVE_INFINITY);
    values[trait.slug] = round(kept, part.decimals);
  }
}

function applyIncident(grown: PlotValues[], planned: PlannedTrial): void {
  const middle = grown[Math.floor(grown.length / 2)];
  if (middle === undefined) return;
  if (planned.incident === 'lost-comma') {
    middle.values['yield'] = round((middle.values['yield'] ?? 0) * 10, 3);
  }
  if (planned.incident === 'excluded-plot') {
    middle.values['yield'] = round((middle.values['yield'] ?? 0) * 0.35, 3);
    middle.excludedReason = 'Seeder blocked: half of the plot was never sown';
  }
}

/** Plots that were never weighed: no yield, and nothing measured on the grain. */
function loseYields(grown: PlotValues[], random: RandomSource): void {
  const count = Math.max(1, Math.round(missingShare * grown.length));
  for (const one of random.shuffle(grown).slice(0, count)) {
    for (const slug of ['yield', 'protein', 'test-weight', 'thousand-kernel-weight']) delete one.values[slug];
  }
}

function writeContent(planned: PlannedTrial, crop: DemoCrop, grown: readonly PlotValues[]): TrialContent {
  const isCheck = new Set(crop.varieties.filter((variety) => variety.isCheck).map((variety) => variety.name));
  const isWinterCrop = planned.crop === 'winter-wheat';
  const head = {
    format: 1,
    cropSlug: planned.crop,
    siteSlug: planned.site,
    season: planned.season,
    name: planned.title,
    design: planned.layout.design,
    kind: planned.kind,
    alpha: 0.05,
    management: {
      fungicide: planned.fungicide,
      irrigated: false,
      seedingRatePlantsM2: crop.seedingRatePlantsM2,
      previousCrop: crop.previousCrop,
    },
    sownOn: isWinterCrop ? `${planned.season - 1}-09-18` : `${planned.season}-05-08`,
    harvestedOn: isWinterCrop ? `${planned.season}-08-12` : `${planned.season}-08-27`,
    entries: [...planned.layout.entries]
      .sort()
      .map((label) => ({ label, varietyName: label, isCheck: isCheck.has(label) })),
  } as const satisfies Partial<TrialContent>;
  if (planned.kind === 'summary') {
    const plots = grown.map(({ plot, values }) => ({ entry: plot.entry, block: plot.block, values }));
    return { ...head, entries: [...head.entries], plots: [], summary: summariseGrown(crop, plots) };
  }
  return {
    ...head,
    entries: [...head.entries],
    plots: grown.map(({ plot, values, excludedReason }) => ({
      ...plot,
      factorLevels: null,
      excludedReason,
      values,
    })),
    summary: [],
  };
}

function round(value: number, decimals: number): number {
  return Number(value.toFixed(decimals));
}
