import { writeFileSync } from 'node:fs';
import path from 'node:path';
import { analyseTrial } from '#server/stats/engine.ts';
import type { TrialDesign, TrialPlot } from '#server/stats/engine.ts';
import { seededNormals, type BenchSuite } from './bench-task.ts';

interface Layout {
  readonly key: string;
  readonly design: TrialDesign;
  readonly plots: readonly TrialPlot[];
}

const label = (prefix: string, i: number) => `${prefix}${String(i + 1).padStart(3, '0')}`;

/** Complete blocks. */
function layBlocks(key: string, entries: number, blocks: number): Layout {
  const normal = seededNormals(900 + entries);
  const entryEffects = Array.from({ length: entries }, () => 0.4 * normal());
  const plots: TrialPlot[] = [];
  for (let b = 0; b < blocks; b++) {
    const block = 0.5 * normal();
    for (let e = 0; e < entries; e++)
      plots.push({
        plot: String(plots.length + 1),
        entry: label('E', e),
        block: String(b + 1),
        value: round(7 + entryEffects[e]! + block + 0.5 * normal()),
      });
  }
  return { key, design: { kind: 'rcbd' }, plots };
}

/** Replicates of incomplete blocks: entries dealt to blocks by a step that differs between replicates. */
function layIncomplete(key: string, entries: number, reps: number, blockSize: number): Layout {
  const normal = seededNormals(300 + entries);
  const entryEffects = Array.from({ length: entries }, () => 0.4 * normal());
  const blocks = entries / blockSize;
  const plots: TrialPlot[] = [];
  for (let r = 0; r < reps; r++) {
    const blockEffects = Array.from({ length: blocks }, () => 0.4 * normal());
    for (let e = 0; e < entries; e++) {
      const block = (e + r * Math.floor(e / blocks)) % blocks;
      plots.push({
        plot: String(plots.length + 1),
        entry: label('E', e),
        rep: String(r + 1),
        block: String(block + 1),
        value: round(7 + entryEffects[e]! + blockEffects[block]! + 0.45 * normal()),
      });
    }
  }
  return { key, design: { kind: 'incomplete-blocks' }, plots };
}

/** Rows and columns within replicates; entries shifted by a step that differs between replicates. */
function layRowColumn(key: string, rows: number, cols: number, reps: number): Layout {
  const normal = seededNormals(500 + rows * cols);
  const entries = rows * cols;
  const entryEffects = Array.from({ length: entries }, () => 0.4 * normal());
  const plots: TrialPlot[] = [];
  for (let r = 0; r < reps; r++) {
    const rowEffects = Array.from({ length: rows }, () => 0.4 * normal());
    const colEffects = Array.from({ length: cols }, () => 0.3 * normal());
    for (let i = 0; i < rows; i++)
      for (let j = 0; j < cols; j++) {
        const e = (i * cols + ((j + r * i) % cols) + 7 * r * cols) % entries;
        plots.push({
          plot: String(plots.length + 1),
          entry: label('E', e),
          rep: String(r + 1),
          row: i + 1,
          col: j + 1,
          value: round(7 + entryEffects[e]! + rowEffects[i]! + colEffects[j]! + 0.35 * normal()),
        });
      }
  }
  return { key, design: { kind: 'row-column' }, plots };
}

function round(value: number): number {
  return Math.round(value * 1000) / 1000;
}

const layouts = {
  rcbd: layBlocks('rcbd-30x4', 30, 4),
  alpha: layIncomplete('alpha-24x3', 24, 3, 4),
  rowColumn: layRowColumn('rowcol-100x4', 10, 10, 4),
  growth: [
    layBlocks('rcbd-60x4', 60, 4),
    layBlocks('rcbd-125x4', 125, 4),
    layBlocks('rcbd-250x4', 250, 4),
    layBlocks('rcbd-500x4', 500, 4),
    layIncomplete('alpha-48x3', 48, 3, 6),
    layIncomplete('alpha-100x3', 100, 3, 10),
    layIncomplete('alpha-200x3', 200, 3, 10),
    layIncomplete('alpha-500x4', 500, 4, 20),
  ],
};

const analyse = ({ plots, design }: Layout) => analyseTrial(plots, design);

/** Single trials: what the engine is held to, then growth to 2,000 plots. */
export const trialSuite: BenchSuite = {
  title: 'One trial (warm: the curve of Tukey’s p for a number of entries and df is kept between runs)',
  script: 'trial-tasks.R',
  tasks: [
    {
      key: 'rcbd-30x4',
      label: '30 entries × 4 complete blocks, all 435 gaps (R: lm + anova + emmeans, unadjusted)',
      run: () => analyse(layouts.rcbd),
      target: { ratio: 40 },
    },
    {
      key: 'rcbd-30x4-tukey',
      label: 'the same with Tukey (R: lm + emmeans, adjust = "tukey")',
      run: () => analyse(layouts.rcbd),
      target: { ratio: 40 },
    },
    {
      key: 'alpha-24x3',
      label: '24 entries × 3 in incomplete blocks, Kenward–Roger, 276 gaps (R: lmer + pbkrtest + emmeans)',
      run: () => analyse(layouts.alpha),
      target: { ratio: 30 },
    },
    {
      key: 'rowcol-100x4',
      label: '100 entries × 4 row-column, Kenward–Roger, 4,950 gaps',
      run: () => analyse(layouts.rowColumn),
      target: { ms: 150 },
    },
    ...layouts.growth.map((layout) => ({
      key: layout.key,
      label: `${layout.key.replace('-', ' ').replace('x', ' × ')}: ${layout.plots.length} plots`,
      run: () => analyse(layout),
      runs: 7,
    })),
  ],
  writeData: (folder) => {
    for (const layout of [layouts.rcbd, layouts.alpha]) {
      const lines = layout.plots.map((p) =>
        [p.plot, p.entry, p.rep ?? '', p.block ?? '', p.row ?? '', p.col ?? '', p.value].join(','),
      );
      writeFileSync(
        path.join(folder, `${layout.key}.csv`),
        ['plot,entry,rep,block,row,col,yield', ...lines, ''].join('\n'),
      );
    }
  },
};
