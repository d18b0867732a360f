import type { GapDistribution } from './money.ts';
import type { PremiumSteps } from './premium-steps.ts';
import { openStudentTail } from './student-tail.ts';

/** What is known of one trait that a buyer pays by, in the trait's unit. */
export type TraitOutlook = {
  steps: PremiumSteps;
  /** Level of the current variety, and how it moves between fields and seasons (standard deviation). */
  level: number;
  spread: number;
  /** The candidate's gap for the grower's own next season, and for the region's average over seasons. */
  ownSeason: GapDistribution;
  region: GapDistribution;
};

/** Premium per tonne of both; a discount is negative. */
export type Premiums = { current: number; candidate: number };

/** Premiums that may come together, and how likely; the weights of all sum to 1. */
export type PremiumState = Premiums & { weight: number };

const normalTail = openStudentTail(Infinity);

/** Nodes and weights of the eight-point Gauss–Legendre rule on −1 to 1. Source: Abramowitz & Stegun (1964), table 25.4. */
const gauss = [
  [0.18343464249565, 0.362683783378362],
  [0.525532409916329, 0.313706645877887],
  [0.796666477413627, 0.222381034453374],
  [0.960289856497536, 0.101228536290376],
].flatMap(([node = 0, weight = 0]) => [
  { node: -node, weight },
  { node, weight },
]);

/** Beyond this many standard deviations a field's level is not followed. */
const farthest = 8;

/**
 * The two levels of one season as the current one's, spread × z about its mean, and the candidate's along with it. The gap
 * is the candidate's part less the current variety's: what raises the current one by itself, in that season or in the
 * trials, lowers the gap. By symmetry half of the gap's variance s² is the current one's, so their covariance is −s²/2
 * and both levels spread alike. A spread under s/√2 is less than that half, and is taken as that.
 */
type JointLevels = {
  spread: number;
  /** How much the candidate's level rises, on average, with a z of 1. */
  slope: number;
  /** The gap at the current one's mean level; its standard error is what z leaves open of the gap. */
  gap: GapDistribution;
};

function joinLevels({ spread: told, ownSeason }: TraitOutlook): JointLevels {
  const spread = Math.max(told, ownSeason.se / Math.SQRT2);
  const correlation = spread === 0 ? 0 : -ownSeason.se / (2 * spread);
  return {
    spread,
    slope: spread + correlation * ownSeason.se,
    gap: { ...ownSeason, se: ownSeason.se * Math.sqrt(1 - correlation ** 2) },
  };
}

/**
 * One season on the grower's own land: both varieties meet the same field and season, which moves them alike, and each
 * its own luck. So varieties that are equal, however well that is known, can expect equal premiums at every level.
 * Each piece of the level between two limits is integrated by itself; the current variety's share of it is exact.
 */
export function listSeasonStates(outlook: TraitOutlook): PremiumState[] {
  const { steps, level } = outlook;
  const { spread, slope, gap } = joinLevels(outlook);
  const candidateChances = openStepChances(steps, gap);
  if (spread === 0) {
    const current = steps.premiums[steps.limits.filter((limit) => limit <= level).length] ?? 0;
    return toStates(steps, current, candidateChances(level), 1);
  }
  const bounds = [-farthest, ...steps.limits.map((limit) => (limit - level) / spread), farthest];
  const seams = listSeams(steps.limits, level + gap.estimate, slope, gap.se / slope);
  return steps.premiums.flatMap((current, i) => {
    const from = Math.max(bounds[i] ?? -farthest, -farthest);
    const to = Math.min(bounds[i + 1] ?? farthest, farthest);
    if (from >= to) return [];
    const mass =
      normalTail(i === 0 ? -Infinity : from) - normalTail(i === steps.limits.length ? Infinity : to);
    const inner = seams.filter((seam) => seam > from && seam < to);
    const chances = averageOver([from, ...inner, to], (z) => candidateChances(level + slope * z));
    return toStates(steps, current, chances, mass);
  });
}

/**
 * Points between which the integrand is smooth: a few over the whole, and closer ones where the candidate's own chance of
 * passing a limit turns from none to sure. Where its level does not follow z at all, those lie nowhere.
 */
function listSeams(limits: readonly number[], centre: number, slope: number, width: number): number[] {
  const turns = limits.flatMap((limit) =>
    [-4, -1.5, 0, 1.5, 4].map((reach) => (limit - centre) / slope + reach * width),
  );
  return [-4, -2, 0, 2, 4, ...turns.filter(Number.isFinite)].sort((a, b) => a - b);
}

/** Chances of the candidate's steps, averaged over a standard normal z between the first and the last of some points. */
function averageOver(points: readonly number[], chancesAt: (z: number) => readonly number[]): number[] {
  let total = 0;
  const sums: number[] = [];
  points.slice(1).forEach((to, i) => {
    const from = points[i] ?? to;
    for (const { node, weight } of gauss) {
      const z = (from + to) / 2 + (node * (to - from)) / 2;
      const share = weight * (to - from) * Math.exp((-z * z) / 2);
      total += share;
      chancesAt(z).forEach((chance, j) => (sums[j] = (sums[j] ?? 0) + share * chance));
    }
  });
  return sums.map((sum) => sum / total);
}

/** By step, the chance that a level plus the gap lies in it. */
function openStepChances({ limits }: PremiumSteps, gap: GapDistribution): (level: number) => number[] {
  const tail = openStudentTail(gap.df);
  const over = (excess: number): number =>
    gap.se === 0 ? Number(excess <= gap.estimate) : tail((excess - gap.estimate) / gap.se);
  return (level) => {
    const chancesOver = [1, ...limits.map((limit) => over(limit - level)), 0];
    return chancesOver.slice(1).map((next, i) => Math.max((chancesOver[i] ?? 0) - next, 0));
  };
}

function toStates(
  { premiums }: PremiumSteps,
  current: number,
  chances: readonly number[],
  mass: number,
): PremiumState[] {
  return chances
    .map((chance, j) => ({ current, candidate: premiums[j] ?? 0, weight: mass * chance }))
    .filter(({ weight }) => weight > 0);
}

/** The candidate's average gap is followed over this many slices, ± four standard errors. */
const slices = 12;

/**
 * The region's average over seasons: premiums are averaged over fields and seasons, over which both varieties spread
 * alike, and only the average gap stays uncertain. What it may be off by lies half with the one and half with the other,
 * and is no part of what they spread by around it.
 */
export function listAverageStates(outlook: TraitOutlook): PremiumState[] {
  const { steps, level, region } = outlook;
  const spread = Math.sqrt(joinLevels(outlook).spread ** 2 - region.se ** 2 / 4);
  const tail = openStudentTail(region.df);
  const over = (i: number): number => (i === 0 ? 1 : i === slices ? 0 : tail(-4 + (8 * i) / slices));
  return Array.from({ length: slices }, (_, i) => {
    const off = (region.se * (-4 + (8 * (i + 0.5)) / slices)) / 2;
    return {
      current: averagePremium(steps, level - off, spread),
      candidate: averagePremium(steps, level + region.estimate + off, spread),
      weight: over(i) - over(i + 1),
    };
  });
}

/** Premium per tonne averaged over a level that is normal about its mean. */
function averagePremium({ limits, premiums }: PremiumSteps, mean: number, spread: number): number {
  const chanceOver = (limit: number): number =>
    spread === 0 ? Number(mean >= limit) : normalTail((limit - mean) / spread);
  return limits.reduce(
    (sum, limit, i) => sum + ((premiums[i + 1] ?? 0) - (premiums[i] ?? 0)) * chanceOver(limit),
    premiums[0] ?? 0,
  );
}

/** More states than this say no more, and take their time. */
const mostStates = 24;

/** The states of several traits together, taken as independent of each other. */
export function joinStates(traits: readonly PremiumState[][]): PremiumState[] {
  const none: PremiumState = { current: 0, candidate: 0, weight: 1 };
  return traits.reduce(
    (joined, states) =>
      thinOut(
        joined.flatMap((a) =>
          states.map((b) => ({
            current: a.current + b.current,
            candidate: a.candidate + b.candidate,
            weight: a.weight * b.weight,
          })),
        ),
      ),
    [none],
  );
}

/** Puts neighbours by their difference together until few are left; the means stay what they are. */
function thinOut(states: readonly PremiumState[]): PremiumState[] {
  if (states.length <= mostStates) return [...states];
  const sorted = states.toSorted((a, b) => a.candidate - a.current - (b.candidate - b.current));
  const groups = new Map<number, PremiumState>();
  let before = 0;
  for (const state of sorted) {
    const at = Math.min(Math.floor((before + state.weight / 2) * mostStates), mostStates - 1);
    before += state.weight;
    const held = groups.get(at) ?? { current: 0, candidate: 0, weight: 0 };
    const weight = held.weight + state.weight;
    const mean = (a: number, b: number): number => (a * held.weight + b * state.weight) / weight;
    groups.set(at, {
      current: mean(held.current, state.current),
      candidate: mean(held.candidate, state.candidate),
      weight,
    });
  }
  return [...groups.values()];
}
