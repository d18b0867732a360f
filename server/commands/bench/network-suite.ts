import { writeFileSync } from 'node:fs';
import path from 'node:path';
import { combineTrials, type TrialCell } from '#server/stats/engine.ts';
import { fitNetwork } from '#server/stats/network/fit-network.ts';
import { frameNetwork } from '#server/stats/network/network-frame.ts';
import { seededNormals, seededNumbers, type BenchSuite, type BenchTask } from './bench-task.ts';

interface NetworkShape {
  readonly entries: number;
  readonly sites: number;
  readonly years: number;
  /** share of environments in which an entry stands */
  readonly presence: number;
  readonly seed: number;
}

/** Cells with the variances of a cereal: entry .5, entry:site .25, entry:year .2, rest .3, error about .3 t/ha. */
function growCells({ entries, sites, years, presence, seed }: NetworkShape): TrialCell[] {
  const normal = seededNormals(seed);
  const uniform = seededNumbers(seed + 1);
  const draw = (count: number, sd: number): number[] => Array.from({ length: count }, () => sd * normal());
  const main = draw(entries, 0.5);
  const bySite = draw(entries * sites, 0.25);
  const byYear = draw(entries * years, 0.2);
  const cells: TrialCell[] = [];
  for (let s = 0; s < sites; s++)
    for (let y = 0; y < years; y++) {
      const level = 7.5 + 1.3 * normal();
      for (let i = 0; i < entries; i++) {
        if (uniform() >= presence) continue;
        const variance = 0.05 + 0.1 * uniform();
        const effect = main[i]! + bySite[i * sites + s]! + byYear[i * years + y]! + 0.3 * normal();
        const mean = Math.round(1e4 * (level + effect + Math.sqrt(variance) * normal())) / 1e4;
        cells.push({ entry: `B${i}`, site: `P${s}`, year: 2015 + y, mean, variance });
      }
    }
  return cells;
}

const table = growCells({ entries: 12, sites: 5, years: 4, presence: 1, seed: 11 });
const sparse = growCells({ entries: 30, sites: 8, years: 3, presence: 0.5, seed: 12 });
const big = growCells({ entries: 60, sites: 40, years: 5, presence: 0.5, seed: 13 });

/** The fit alone at 50 environments: what grows with the cells. */
function growthTask(cells: number): BenchTask {
  const grown = growCells({ entries: cells / 50, sites: 10, years: 5, presence: 1, seed: cells });
  return {
    key: `fit-${cells}`,
    label: `variances of ${cells.toLocaleString('en')} cells in 50 environments, ${describeMemory(grown)}`,
    run: () => fitNetwork(frameNetwork(grown), null),
    runs: 5,
  };
}

/** Memory that a fit leaves behind or passes through, as far as the heap shows it. */
function describeMemory(cells: readonly TrialCell[]): string {
  const before = process.memoryUsage();
  const fit = fitNetwork(frameNetwork(cells), null);
  const after = process.memoryUsage();
  const bytes = after.heapUsed + after.arrayBuffers - before.heapUsed - before.arrayBuffers;
  return `${fit.outcome === 'fitted' ? fit.iterations : 0} steps, ${Math.max(0, bytes / 2 ** 20).toFixed(0)} MB`;
}

const writeCells = (folder: string, name: string, cells: readonly TrialCell[]): void =>
  writeFileSync(
    path.join(folder, `${name}.csv`),
    [
      'entry,site,year,mean,variance',
      ...cells.map(({ entry, site, year, mean, variance }) => [entry, site, year, mean, variance].join(',')),
    ].join('\n'),
  );

/** Networks: whole results, all pairs with Kenward–Roger, against weighted lmer or rma.mv, which give no such pairs. */
export const networkSuite: BenchSuite = {
  title: 'Many trials',
  tasks: [
    {
      key: 'table-12x20',
      label:
        '12 entries × 20 environments, penalised, 66 gaps with Kenward–Roger (R: weighted lmer, no gaps)',
      run: () => combineTrials(table, { usual: { site: 0.06, year: 0.04, rest: 0.09 } }),
      target: { ms: 15 },
    },
    {
      key: 'sparse-30x24',
      label: `${sparse.length} cells, 30 entries × 24 environments, 435 gaps (R: rma.mv, sparse, no gaps)`,
      run: () => combineTrials(sparse, { penalty: 0 }),
      target: { ratio: 15 },
    },
    {
      key: 'big-60x200',
      label: `${big.length.toLocaleString('en')} cells, 60 entries × 200 environments, 1,770 gaps (R: weighted lmer, no gaps)`,
      run: () => combineTrials(big, { penalty: 0 }),
      target: { ratio: 15 },
      runs: 5,
    },
    {
      key: 'big-60x200-time',
      label: 'the same, in itself',
      run: () => combineTrials(big, { penalty: 0 }),
      target: { ms: 500 },
      runs: 5,
    },
    ...[100, 1_000, 5_000, 20_000].map(growthTask),
  ],
  script: 'network-tasks.R',
  writeData: (folder) => {
    writeCells(folder, 'table-12x20', table);
    writeCells(folder, 'sparse-30x24', sparse);
    writeCells(folder, 'big-60x200', big);
  },
};
