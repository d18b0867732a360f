import { execFile } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { runImport } from '#server/commands/run-import.ts';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { makeCrop, makeRegion, makeSite } from '#tests/support/factories.ts';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';

/**
 * Published examples go in by `trials:import` and their printed analyses come out of the API.
 * Where each comes from stands in tests/reference/published/README.md.
 */
const folder = fileURLToPath(new URL('../reference/published/', import.meta.url));

let world: ApiWorld;
let agent: Agent;
let temporary: string;
/** Options that every import here shares. */
let common: string[];
let made = 0;

beforeAll(async () => {
  temporary = mkdtempSync(join(tmpdir(), 'gavelrow-import-'));
  world = await openApiWorld('empty');
  const { db } = world.database;
  const region = await makeRegion(db);
  const site = await makeSite(db, region.id);
  const crop = await makeCrop(db, { typicalYield: 5 }, [
    { slug: 'nitrogen', unit: 'mg' },
    // A yield in the unit of its book, stored as it stands.
    { slug: 'grain', unit: 'kg/ha' },
  ]);
  common = ['--crop', crop.slug, '--site', site.slug, '--season', '1984'];
  agent = (await world.signInAs('agronomist', { regionIds: [region.id] })).agent;
});
afterAll(async () => {
  await world.close();
  rmSync(temporary, { recursive: true, force: true });
});

/** Imports a file and publishes it. @returns the trial's id */
async function bringIn(path: string, options: string[]): Promise<string> {
  const said: string[] = [];
  made += 1;
  const args = [path, ...common, '--name', `Example ${made}`, '--publish', 'Printed example', ...options];
  const print = { say: (line: string) => said.push(line), refuse: (line: string) => said.push(line) };
  const code = await runImport(world.database.db, args, print);
  expect(code, said.join('\n')).toBe(0);
  return said.at(-1)?.replace('Trial ', '') ?? '';
}

async function analyse(trialId: string, query: Record<string, string | number>): Promise<TrialAnalysisView> {
  const reply = await agent.get(`/api/trials/${trialId}/analysis`).query(query).expect(200);
  return reply.body.analysis;
}

/** Writes the rows of a published file that pass as a file of their own. */
function extract(name: string, keep: (cells: string[]) => boolean): string {
  const [header = '', ...rows] = readFileSync(join(folder, name), 'utf8').trim().split('\n');
  const path = join(temporary, `${made}.csv`);
  writeFileSync(path, [header, ...rows.filter((row) => keep(row.replaceAll('"', '').split(',')))].join('\n'));
  return path;
}

const row = (analysis: TrialAnalysisView, term: string) => analysis.anova.find((one) => one.term === term);

describe('one-way and complete blocks', () => {
  test('Erdman 1946, nitrogen in clover: completely randomised', async () => {
    const id = await bringIn(join(folder, 'erdman.nodulation.csv'), [
      ...['--design', 'crd', '--trait', 'nitrogen', '--entry-column', 'strain'],
    ]);
    const analysis = await analyse(id, { trait: 'nitrogen' });
    expect(row(analysis, 'entry')?.ss).toBeCloseTo(847.05, 2);
    expect(row(analysis, 'entry')?.df).toBe(5);
    expect(row(analysis, 'residual')?.ss).toBeCloseTo(282.93, 2);
    expect(analysis.residualDf).toBe(24);
    expect(analysis.residualMs).toBeCloseTo(11.789, 3);
    expect(row(analysis, 'entry')?.f).toBeCloseTo(14.37, 2);
    expect(analysis.cvPercent).toBeCloseTo(17.27, 2);
    expect(analysis.lsd?.mean).toBeCloseTo(4.482, 3);
    expect(analysis.lsd?.max).toBeCloseTo(4.482, 3);
    // HSD 6.714: under Tukey a pair differs when its gap is larger.
    const tukey = await analyse(id, { trait: 'nitrogen', comparison: 'tukey' });
    for (const gap of tukey.gaps) expect((gap.p ?? 1) < 0.05).toBe(Math.abs(gap.estimate ?? 0) > 6.714);
  });

  test('Gomez and Gomez 1984, seed rates of rice: complete blocks, brought from kg/ha to t/ha', async () => {
    const options = ['--design', 'rcbd', '--entry-column', 'rate'];
    const file = join(folder, 'gomez.seedrate.csv');
    const analysis = await analyse(await bringIn(file, [...options, '--unit', 'kg/ha']), {});
    expect(analysis.grandMean).toBeCloseTo(4.9596, 4);
    expect((row(analysis, 'rep')?.ss ?? 0) * 1e6).toBeCloseTo(1_944_361, -1);
    const asPrinted = [...options, '--trait', 'grain', '--value-column', 'yield'];
    const printed = await analyse(await bringIn(file, asPrinted), { trait: 'grain' });
    expect(row(printed, 'rep')?.ss).toBeCloseTo(1_944_361, 0);
    expect(row(printed, 'entry')?.ss).toBeCloseTo(1_198_331, 0);
    expect(row(printed, 'residual')?.ss).toBeCloseTo(1_658_376, 0);
    expect(printed.residualDf).toBe(15);
    expect(printed.residualMs).toBeCloseTo(110_558, 0);
    expect(row(printed, 'entry')?.f).toBeCloseTo(2.17, 2);
    expect(row(printed, 'entry')?.p).toBeCloseTo(0.113, 3);
    expect(printed.cvPercent).toBeCloseTo(6.7, 1);
    expect(printed.cautions.map((caution) => caution.code)).toEqual(['trial-f-not-significant']);
    const protectedLsd = await analyse(printed.trialId, { trait: 'grain', comparison: 'protected-lsd' });
    expect(printed.pairsDifferent).toBeGreaterThan(0);
    expect(protectedLsd.pairsDifferent).toBe(0);
  });

  test('the same with a plot missing: Yates’ value stands in for it', async () => {
    const file = extract('gomez.seedrate.csv', ([rate, rep]) => !(rate === '100' && rep === 'R2'));
    const id = await bringIn(file, [
      ...['--design', 'rcbd', '--entry-column', 'rate', '--trait', 'grain', '--value-column', 'yield'],
    ]);
    const analysis = await analyse(id, { trait: 'grain' });
    expect(analysis.residualDf).toBe(14);
    // The least-squares mean is the plain mean with Yates' 5264.87 in the gap.
    const expected = (5164 + 5264.87 + 4986 + 4410) / 4;
    expect(analysis.means.find((mean) => mean.entry === '100')?.mean).toBeCloseTo(expected, 2);
  });

  test('a training text, nitrogen on rice', async () => {
    const id = await bringIn(join(folder, 'training.rice.csv'), ['--design', 'rcbd', '--entry-column', 'n']);
    const analysis = await analyse(id, {});
    expect(analysis.residualMs).toBeCloseTo(0.163, 3);
    expect(analysis.gaps[0]?.se).toBeCloseTo(0.285, 3);
    expect(analysis.lsd?.mean).toBeCloseTo(0.621, 2);
    const strict = await analyse(id, { alpha: 0.01 });
    expect(strict.lsd?.mean).toBeCloseTo(0.871, 2);
  });

  test('Petersen 1994, checks in all blocks and new lines in one each', async () => {
    const id = await bringIn(join(folder, 'petersen.wheat.csv'), [
      ...['--design', 'rcbd', '--trait', 'grain', '--value-column', 'yield'],
    ]);
    const analysis = await analyse(id, { trait: 'grain' });
    expect(analysis.residualDf).toBe(10);
    expect(analysis.residualMs).toBeCloseTo(91_102.7, 0);
  });
});

test('Goulden 1952, a Latin square', async () => {
  const id = await bringIn(join(folder, 'goulden.latin.csv'), ['--design', 'latin-square']);
  const analysis = await analyse(id, {});
  expect(row(analysis, 'row')?.ss).toBeCloseTo(46.67, 2);
  expect(row(analysis, 'col')?.ss).toBeCloseTo(14.02, 2);
  expect(row(analysis, 'entry')?.ss).toBeCloseTo(196.61, 2);
  expect(row(analysis, 'residual')?.ss).toBeCloseTo(28.04, 2);
  expect(analysis.residualDf).toBe(12);
  expect(row(analysis, 'entry')?.f).toBeCloseTo(21.03, 2);
});

test('Yates 1935, a split plot of oats', async () => {
  const id = await bringIn(join(folder, 'yates.oats.csv'), [
    ...['--design', 'split-plot', '--trait', 'grain', '--value-column', 'Y'],
    ...['--block-column', 'B', '--main-column', 'V', '--entry-column', 'N'],
  ]);
  const analysis = await analyse(id, { trait: 'grain' });
  expect(analysis.method).toBe('reml');
  expect(row(analysis, 'main')?.f).toBeCloseTo(1.485, 3);
  expect(row(analysis, 'main')?.denDf).toBeCloseTo(10, 6);
  expect(row(analysis, 'sub')?.f).toBeCloseTo(37.69, 2);
  expect(row(analysis, 'sub')?.denDf).toBeCloseTo(45, 6);
  expect(row(analysis, 'main:sub')?.f).toBeCloseTo(0.303, 3);
  // Error of the subplots 7969 / 45; standard error of a difference between rates of nitrogen 4.436.
  expect(analysis.residualMs).toBeCloseTo(7969 / 45, 0);
  for (const gap of analysis.gaps) expect(gap.se).toBeCloseTo(4.436, 3);
});

describe('series of trials, one of each site or year', () => {
  /** Sums of squares over the trials of a series. */
  async function sumOver(name: string, groups: string[], column: number, options: string[], trait: string) {
    const sums = { block: 0, entry: 0, residual: 0, residualDf: 0 };
    for (const group of groups) {
      const file = extract(name, (cells) => cells[column] === group);
      const analysis = await analyse(await bringIn(file, ['--design', 'rcbd', ...options]), { trait });
      sums.block += row(analysis, 'block')?.ss ?? 0;
      sums.entry += row(analysis, 'entry')?.ss ?? 0;
      sums.residual += row(analysis, 'residual')?.ss ?? 0;
      sums.residualDf += analysis.residualDf ?? 0;
    }
    return sums;
  }

  test('Onofri and Ciriciofolo 2007, durum in seven years', async () => {
    const years = ['1996', '1997', '1998', '1999', '2000', '2001', '2002'];
    const sums = await sumOver('onofri.winterwheat.csv', years, 0, [], 'yield');
    expect(sums.block).toBeCloseTo(3.922, 3);
    // variety and variety × year together
    expect(sums.entry).toBeCloseTo(11.544 + 27.713, 2);
    expect(sums.residual).toBeCloseTo(14.583, 3);
    expect(sums.residualDf).toBe(98);
  });

  test('Linder 1963, wheat at seven sites', async () => {
    const rows = readFileSync(join(folder, 'linder.wheat.csv'), 'utf8').trim().split('\n').slice(1);
    const places = [...new Set(rows.map((line) => line.replaceAll('"', '').split(',')[0] ?? ''))];
    expect(places).toHaveLength(7);
    const options = ['--trait', 'grain', '--value-column', 'yield'];
    const sums = await sumOver('linder.wheat.csv', places, 0, options, 'grain');
    expect(sums.entry).toBeCloseTo(23_429 + 188_224, -1);
    expect(sums.residual).toBeCloseTo(232_185, -1);
    expect(sums.residualDf).toBe(168);
  });
});

describe('the command itself', () => {
  const run = promisify(execFile);
  const root = fileURLToPath(new URL('../../', import.meta.url));
  const start = (args: string[]) =>
    run('node', ['--import', 'tsx', 'server/commands/import-trial.ts', ...args], {
      cwd: root,
      env: { ...process.env, DATABASE_URL: world.database.url },
    });

  test('says what it took in and exits with 0', async () => {
    const args = [join(folder, 'training.rice.csv'), ...common, '--design', 'rcbd', '--entry-column', 'n'];
    const { stdout } = await start(args);
    expect(stdout).toMatch(/^Rows 20, plots 20, entries 5, traits yield\./);
    expect(stdout).toMatch(/Trial [0-9a-f-]{36}/);
  });

  test('keeps no draft of a trial that was to be published and cannot be', async () => {
    const path = join(temporary, 'thin.csv');
    writeFileSync(path, 'entry,rep,yield\nA,1,5.1\nB,2,\n');
    const args = [path, ...common, '--design', 'rcbd', '--name', 'Thin'];
    const refused: string[] = [];
    const print = { say: () => undefined, refuse: (line: string) => refused.push(line) };
    expect(await runImport(world.database.db, [...args, '--publish', 'Checked'], print)).toBe(1);
    expect(refused).toEqual(['This trial cannot be analysed as it stands.']);
    // The same name is still free.
    expect(await runImport(world.database.db, args, print)).toBe(0);
  });

  test('names every bad row, stores nothing and exits with 1', async () => {
    const path = join(temporary, 'bad.csv');
    writeFileSync(path, 'entry;bloc;rendement\nA;1;5,1\nB;1;beaucoup\n;1;4,9\n');
    const failure = await start([path, ...common, '--design', 'rcbd', '--name', 'Bad']).catch(
      (error: unknown) => error,
    );
    expect(failure).toMatchObject({
      code: 1,
      stderr: expect.stringMatching(
        /line 3, rendement: “beaucoup”\. A number was expected here\.\nline 4, entry: The entry is missing[^]*Nothing was stored/,
      ),
    });
    const { body } = await agent.get('/api/desk/trials').expect(200);
    expect(body.trials.map((trial: { name: string }) => trial.name)).not.toContain('Bad');
  });
});
