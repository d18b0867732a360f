import { AnalysisError } from '#server/stats/analysis-error.ts';
import {
  buildFactor,
  buildFixedTerm,
  buildRandomTerm,
  type Factor,
  type FixedTerm,
  type RandomTerm,
} from './model-terms.ts';
import type { UsedPlots } from './read-plots.ts';
import { trialLimits, type DesignPart, type TrialDesign, type TrialPlot } from './trial-data.ts';

/** The model of a design for the plots at hand. */
export interface TrialModel {
  readonly design: TrialDesign;
  readonly count: number;
  /** the intercept first, then blocks, then what is compared */
  readonly fixed: readonly FixedTerm[];
  readonly random: readonly RandomTerm[];
  /** columns of the fixed model matrix */
  readonly width: number;
  /** the families of means: the first is the trial's own, the others go by name */
  readonly families: readonly { readonly name: string; readonly factors: readonly Factor[] }[];
  /** what a residual may depend on: the entry (or main family) and a blocking factor, if any */
  readonly blocking: Factor | null;
}

/** Reads the parts of the plots that a design uses. */
interface PartReader {
  factor: (part: DesignPart) => Factor;
  has: (part: 'rep' | 'block') => boolean;
  named: (name: string) => Factor;
}

/**
 * @throws AnalysisError missing-level, duplicate-position, bad-option, one-entry, too-large
 */
export function buildModel(used: UsedPlots, design: TrialDesign): TrialModel {
  const parts = readParts(used, design);
  const recipe = recipes[design.kind](parts, design);
  const count = used.plots.length;
  const fixed = [buildFixedTerm([], count, 0)];
  let width = 1;
  for (const factors of recipe.fixed) {
    // a factor with a single level (one block, say) has no contrast and would only add an empty row
    if (factors.some((factor) => factor.levels.length < 2)) continue;
    const term = buildFixedTerm(factors, count, width);
    fixed.push(term);
    width += term.width;
    if (width > trialLimits.parameters)
      throw new AnalysisError('too-large', `more than ${trialLimits.parameters} parameters`);
  }
  const random = recipe.random.map((factors) => buildRandomTerm(factors, count));
  if (random.reduce((sum, term) => sum + term.size, 0) > trialLimits.randomLevels)
    throw new AnalysisError('too-large', `more than ${trialLimits.randomLevels} levels of random terms`);
  const families = recipe.families.map((factors) => ({
    name: factors.map((f) => f.name).join(':'),
    factors,
  }));
  const own = recipe.families[0]!.reduce((product, factor) => product * factor.levels.length, 1);
  if (own < 2) throw new AnalysisError('one-entry', 'only one entry has values', rowsOf(used));
  if (own > trialLimits.entries)
    throw new AnalysisError('too-large', `${own} entries; at most ${trialLimits.entries} are compared`);
  return { design, count, fixed, random, width, families, blocking: recipe.blocking };
}

/** The model with random terms as fixed ones, before the last fixed term, so that blocks still stand first. */
export function takeAsFixed(model: TrialModel, random: readonly RandomTerm[]): TrialModel {
  let width = model.width;
  const added = random.map((term) => {
    const factor: Factor = { name: term.name, levels: term.levels, codes: term.cells };
    const fixed = buildFixedTerm([factor], model.count, width);
    width += fixed.width;
    return fixed;
  });
  return { ...model, fixed: [...model.fixed, ...added], random: [], width };
}

interface Recipe {
  readonly fixed: readonly (readonly Factor[])[];
  readonly random: readonly (readonly Factor[])[];
  readonly families: readonly (readonly Factor[])[];
  readonly blocking: Factor | null;
}

const recipes: Record<TrialDesign['kind'], (parts: PartReader, design: TrialDesign) => Recipe> = {
  crd: (parts) => {
    const entry = parts.factor('entry');
    return { fixed: [[entry]], random: [], families: [[entry]], blocking: null };
  },
  rcbd: completeBlocks,
  strips: completeBlocks,
  'latin-square': (parts) => {
    const [entry, row, col] = [parts.factor('entry'), parts.factor('row'), parts.factor('col')];
    return { fixed: [[row], [col], [entry]], random: [], families: [[entry]], blocking: row };
  },
  'incomplete-blocks': (parts) => {
    const [entry, block] = [parts.factor('entry'), parts.factor('block')];
    if (!parts.has('rep'))
      return { fixed: [[entry]], random: [[block]], families: [[entry]], blocking: block };
    const rep = parts.factor('rep');
    return { fixed: [[rep], [entry]], random: [[rep, block]], families: [[entry]], blocking: rep };
  },
  'row-column': (parts) => {
    const [entry, row, col] = [parts.factor('entry'), parts.factor('row'), parts.factor('col')];
    if (!parts.has('rep'))
      return { fixed: [[entry]], random: [[row], [col]], families: [[entry]], blocking: row };
    const rep = parts.factor('rep');
    return {
      fixed: [[rep], [entry]],
      random: [
        [rep, row],
        [rep, col],
      ],
      families: [[entry]],
      blocking: rep,
    };
  },
  'split-plot': (parts) => {
    const [block, main, sub] = [blockOrRep(parts), parts.factor('main'), parts.factor('sub')];
    return {
      fixed: [[block], [main], [sub], [main, sub]],
      random: [[block, main]],
      families: [[sub], [main], [sub], [main, sub]],
      blocking: block,
    };
  },
  factorial: (parts, design) => {
    const names = design.factors ?? [];
    if (names.length === 0) throw new AnalysisError('bad-option', 'a factorial needs its factors');
    if (new Set(names).size !== names.length)
      throw new AnalysisError('bad-option', 'a factor is named twice');
    const factors = names.map((name) => parts.named(name));
    const block = parts.has('block') || parts.has('rep') ? blockOrRep(parts) : null;
    const subsets = subsetsBySize(factors);
    return {
      fixed: [...(block ? [[block]] : []), ...subsets],
      random: [],
      families: [
        factors,
        ...subsets.filter((subset) => subset.length < factors.length || factors.length === 1),
      ],
      blocking: block,
    };
  },
};

function completeBlocks(parts: PartReader): Recipe {
  const [block, entry] = [blockOrRep(parts), parts.factor('entry')];
  return { fixed: [[block], [entry]], random: [], families: [[entry]], blocking: block };
}

function blockOrRep(parts: PartReader): Factor {
  return parts.has('block') || !parts.has('rep') ? parts.factor('block') : parts.factor('rep');
}

/** All non-empty subsets: single factors first, then pairs, and so on; within a size in the order given. */
function subsetsBySize<T>(items: readonly T[]): T[][] {
  const subsets: T[][] = [];
  for (let mask = 1; mask < 1 << items.length; mask++) subsets.push(items.filter((_, i) => mask & (1 << i)));
  const rank = (subset: T[]) => subset.map((item) => items.indexOf(item));
  return subsets.sort((a, b) => a.length - b.length || compareLists(rank(a), rank(b)));
}

function compareLists(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return a[i]! - b[i]!;
  return 0;
}

function readParts(used: UsedPlots, design: TrialDesign): PartReader {
  const count = used.plots.length;
  const rowOf = (i: number) => used.index[i]! + 1;
  const read = (name: string, pick: (plot: TrialPlot) => string | number | null | undefined) =>
    buildFactor(name, count, (i) => pick(used.plots[i]!), rowOf);
  return {
    factor: (part) => read(design.termNames?.[part] ?? part, pickers[part]),
    has: (part) =>
      used.plots.some((plot) => plot[part] !== undefined && plot[part] !== null && plot[part] !== ''),
    named: (name) => read(name, (plot) => plot.factors?.[name]),
  };
}

const pickers: Record<DesignPart, (plot: TrialPlot) => string | number | null | undefined> = {
  entry: (plot) => plot.entry,
  rep: (plot) => plot.rep,
  block: (plot) => plot.block,
  row: (plot) => plot.row,
  col: (plot) => plot.col,
  main: (plot) => plot.main,
  sub: (plot) => plot.sub ?? plot.entry,
};

function rowsOf(used: UsedPlots): number[] {
  return Array.from(used.index, (i) => i + 1);
}
