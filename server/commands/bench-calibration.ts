import { parseArgs } from 'node:util';
import type { ReliabilityBin, Share } from './bench/chance-bins.ts';
import {
  measureCoverage,
  measureReliability,
  type CoverageResult,
  type ReliabilityResult,
} from './bench/network-calibration.ts';
import type { WorldPlan } from './bench/network-world.ts';
import { measurePremiums } from './bench/premium-calibration.ts';
import type { PremiumPlan } from './bench/premium-world.ts';

// Whether the weigh-up is right as often as it says: simulated regions put through its own engine.
// `--quick`: a few layouts in under three minutes. `--runs N`: regions a line (full: 1,000). `--seed N`.
// `--part coverage|reliability|premiums`: that table alone.

const { values } = parseArgs({
  options: {
    quick: { type: 'boolean', default: false },
    runs: { type: 'string' },
    seed: { type: 'string', default: '1' },
    part: { type: 'string', default: 'all' },
  },
});
const runs = Number(values.runs ?? (values.quick ? 150 : 1000));
const seed = Number(values.seed);
if (!(Number.isInteger(runs) && runs > 0 && Number.isInteger(seed))) {
  console.error('--runs and --seed are whole numbers');
  process.exit(2);
}

const plain: WorldPlan = {
  sites: 3,
  seasons: 3,
  entries: 12,
  presence: 1,
  factor: 1,
  entrySd: 0,
  plots: 'normal',
  hailed: 0,
};

/** Every layout with every number of entries and every truth about the variances. */
function listPlans(): WorldPlan[] {
  if (values.quick)
    return [
      { ...plain, sites: 2, seasons: 1, entries: 5 },
      plain,
      { ...plain, factor: 4 },
      { ...plain, entries: 5, presence: 0.5 },
    ];
  const layouts = [
    [2, 1],
    [5, 1],
    [2, 2],
    [3, 3],
    [5, 4],
  ] as const;
  const complete = layouts.flatMap(([sites, seasons]) =>
    [2, 5, 12, 30].flatMap((entries) =>
      [1, 0.25, 4].map((factor): WorldPlan => ({ ...plain, sites, seasons, entries, factor })),
    ),
  );
  const large = layouts.filter(([sites]) => sites >= 3);
  const half = large.flatMap(([sites, seasons]) =>
    [5, 12].flatMap((entries) =>
      [1, 4].map((factor): WorldPlan => ({ ...plain, sites, seasons, entries, factor, presence: 0.5 })),
    ),
  );
  const rough = large.flatMap(([sites, seasons]): WorldPlan[] => [
    { ...plain, sites, seasons, plots: 'skewed' },
    { ...plain, sites, seasons, hailed: 2 },
  ]);
  return [...complete, ...half, ...rough];
}

function listReliabilityPlans(): WorldPlan[] {
  const grown = { ...plain, entrySd: 0.3 };
  if (values.quick) return [grown];
  return [
    { ...grown, sites: 2, seasons: 1 },
    { ...grown, sites: 5, seasons: 1 },
    grown,
    { ...grown, sites: 5, seasons: 4 },
    { ...grown, factor: 4 },
  ];
}

/** Where a buyer pays by protein: layouts, the organisation's knowledge of protein, and yield going against it. */
function listPremiumPlans(): PremiumPlan[] {
  const base = { sites: 3, seasons: 3, entries: 12, correlation: 0, isProteinUsual: true, factor: 1 };
  if (values.quick) return [base];
  const oneSeason = { ...base, sites: 5, seasons: 1 };
  return [
    { ...base, sites: 2, seasons: 2 },
    oneSeason,
    base,
    { ...base, sites: 5, seasons: 4 },
    { ...oneSeason, isProteinUsual: false },
    { ...base, entries: 3, isProteinUsual: false },
    { ...oneSeason, correlation: -0.5 },
    { ...base, correlation: -0.5 },
    { ...base, correlation: -0.8 },
  ];
}

const percent = ({ value, error }: Share): string =>
  `${(100 * value).toFixed(1)} ± ${(100 * error).toFixed(1)}`;

function describePlan({ sites, seasons, entries, presence, factor, plots, hailed }: WorldPlan): string {
  const extras = [
    presence < 1 ? 'half present' : '',
    plots === 'skewed' ? 'skewed plots' : '',
    hailed > 0 ? `${hailed} hailed` : '',
  ];
  return `${sites} × ${seasons} | ${entries} | × ${factor} | ${extras.filter((extra) => extra !== '').join(', ')}`;
}

/** Targets of the product: coverage 94–98 with the right usual variances and at least 90 with × 4 from 2 × 2 on; false verdicts at most 5 and 13 in 100. */
function judgeCoverage({ plan, region, ownSeason, falsePair, falseFamily }: CoverageResult): string {
  const isTold = plan.factor === 1;
  const isHeldTo = isTold || (plan.factor === 4 && plan.seasons >= 2);
  if (!isHeldTo) return '';
  const [low, high, falseLimit] = isTold ? [0.94, 0.98, 0.05] : [0.9, 1, 0.13];
  // two simulation errors of grace
  const isWithin = ({ value, error }: Share): boolean =>
    value >= low - 2 * error && value <= high + 2 * error;
  const isBelow = ({ value, error }: Share): boolean => value <= falseLimit + 2 * error;
  const misses = [
    isWithin(region) ? '' : 'region',
    isWithin(ownSeason) ? '' : 'own season',
    isBelow(falsePair) ? '' : 'pair',
    isBelow(falseFamily) ? '' : 'family',
  ].filter((miss) => miss !== '');
  return misses.length === 0 ? 'yes' : `NO: ${misses.join(', ')}`;
}

function printCoverage(result: CoverageResult): void {
  const { plan, region, ownSeason, falsePair, falseFamily } = result;
  const figures = [region, ownSeason, falsePair, falseFamily].map(percent).join(' | ');
  console.log(`| ${describePlan(plan)} | ${figures} | ${judgeCoverage(result)} |`);
}

/** @param isHeldTo whether the product is to be right within 3 points, with two simulation errors of grace */
function printBins(name: string, isHeldTo: boolean, bins: readonly ReliabilityBin[]): void {
  for (const { from, to, stated, happened } of bins) {
    const isMet = Math.abs(stated - happened.value) <= 0.03 + 2 * happened.error;
    console.log(
      `| ${name} | ${from}–${to} | ${happened.runs} | ${(100 * stated).toFixed(1)} | ${percent(happened)} | ${isHeldTo ? (isMet ? 'yes' : 'NO') : ''} |`,
    );
  }
}

function printReliability({ plan, single, singleShrunken, picked }: ReliabilityResult): void {
  const print = (candidate: string, bins: readonly ReliabilityBin[]): void =>
    printBins(`${plan.sites} × ${plan.seasons} | × ${plan.factor} | ${candidate}`, plan.factor === 1, bins);
  print('planned, by its estimate', single);
  print('planned, shrunken', singleShrunken);
  print('best of 12, shrunken', picked);
}

function printPremiums(plan: PremiumPlan): void {
  const { planned, picked, average } = measurePremiums(plan, runs, seed);
  const { sites, seasons, entries, isProteinUsual, correlation } = plan;
  const told = `${sites} × ${seasons} | ${entries} | ${isProteinUsual ? 'known' : 'unknown'} | ${correlation}`;
  printBins(`${told} | planned, own season`, true, planned);
  printBins(`${told} | best of the list, own season`, true, picked);
  printBins(`${told} | planned, region`, true, average);
}

const tonnes = ({ value, error }: Share): string => `${value.toFixed(3)} ± ${error.toFixed(3)}`;

console.log(`${runs} simulated regions a line, seed ${seed}; figures in 100, ± one simulation error.\n`);
const isAsked = (part: string): boolean => values.part === 'all' || values.part === part;
if (isAsked('coverage')) {
  console.log(
    '| sites × seasons | entries | true variances | | covers region’s average | covers own next season | false verdict, planned pair | false verdict, all at once | met |',
  );
  console.log('|---|---|---|---|---|---|---|---|---|');
  for (const plan of listPlans()) printCoverage(measureCoverage(plan, runs, seed));
}
if (isAsked('reliability')) {
  console.log(
    '\n| sites × seasons | true variances | candidate | stated chance | questions | stated | came true | met |',
  );
  console.log('|---|---|---|---|---|---|---|---|');
  const results = listReliabilityPlans().map((plan) =>
    measureReliability(plan, values.quick ? 2 * runs : 3 * runs, seed),
  );
  results.forEach(printReliability);
  console.log(
    '\n| sites × seasons | true variances | true lead of the best of 12 | by its estimate | shrunken |',
  );
  console.log('|---|---|---|---|---|');
  for (const { plan, lead } of results)
    console.log(
      `| ${plan.sites} × ${plan.seasons} | × ${plan.factor} | ${tonnes(lead.truth)} | ${tonnes(lead.estimate)} | ${tonnes(lead.shrunken)} |`,
    );
}
if (isAsked('premiums')) {
  console.log(
    '\n| sites × seasons | entries | usual variances of protein | yield with protein | chance that it pays | stated chance | questions | stated | came true | met |',
  );
  console.log('|---|---|---|---|---|---|---|---|---|---|');
  for (const plan of listPremiumPlans()) printPremiums(plan);
}
