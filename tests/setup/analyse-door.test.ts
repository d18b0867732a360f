import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import type { TrialAnalysis } from '#server/stats/trial/trial-result.ts';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';

// a command takes a second, on a busy machine many
vi.setConfig({ testTimeout: 60_000 });

const root = fileURLToPath(new URL('../../', import.meta.url));
const cases = path.join(root, 'tests/reference/open');
const run = promisify(execFile);

/** What a line may hold: an analysis, or an error. */
type Line = TrialAnalysis & { readonly error: { readonly code: string; readonly rows: readonly number[] } };

interface Reply {
  readonly code: number;
  readonly lines: Line[];
}

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'gavelrow-door-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function analyse(...args: string[]): Promise<Reply> {
  const command = ['--import', 'tsx', 'server/commands/analyse.ts', ...args];
  const { stdout, code } = await run('node', command, { cwd: root, maxBuffer: 1e9 }).then(
    (done) => ({ ...done, code: 0 }),
    (error: { stdout: string; code: number }) => error,
  );
  return {
    code,
    lines: stdout
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line)),
  };
}

async function write(name: string, text: string): Promise<string> {
  const file = path.join(folder, name);
  await writeFile(file, text);
  return file;
}

describe('analyse trial', () => {
  it('prints one JSON object a file', async () => {
    const files = ['03-rcbd-immer', '10-paired-strips-6'].map((name) => `${cases}/${name}/plots.csv`);
    const { code, lines } = await analyse('trial', ...files, '--design', 'rcbd', '--response', 'yield');
    expect(code).toBe(0);
    expect(lines).toHaveLength(2);
    expect(lines[0]).toMatchObject({
      design: 'rcbd',
      fit: { method: 'ols', plots: 30, used: 30, converged: true },
      dunnett: null,
    });
    expect(Object.keys(lines[1]!.gaps[0]!)).toEqual(
      expect.arrayContaining([
        'a',
        'b',
        'estimate',
        'se',
        'df',
        't',
        'p',
        'lsd05',
        'lsd10',
        'pTukey',
        'pHolm',
      ]),
    );
    expect(Object.keys(lines[1]!.lsd)).toEqual(expect.arrayContaining(['0.05', '0.1']));
  });

  it('takes the columns of a split plot by name and gives each factor', async () => {
    const file = `${cases}/08-splitplot-oats/plots.csv`;
    const args = ['--design', 'split-plot', '--response', 'yield', '--main', 'variety', '--sub', 'nitro'];
    const { lines } = await analyse('trial', file, ...args);
    expect(lines[0]!.means.map((mean) => mean.entry)).toEqual(['0', '0.2', '0.4', '0.6']);
    expect(lines[0]!.anova.map((row) => row.term)).toEqual(['block', 'variety', 'nitro', 'variety:nitro']);
    expect(lines[0]!.fit.components.map((c) => c.name)).toEqual(['block:variety', 'residual']);
    expect(Object.keys(lines[0]!.factors)).toEqual(['variety', 'nitro', 'variety:nitro']);
  });

  it('takes the factors of a factorial and renamed columns', async () => {
    const file = await write(
      'renamed.csv',
      'Sorte;Wdh;a;b;t\nx;1;1;1;5.1\ny;1;1;2;6\nx;2;2;1;5.4\ny;2;2;2;7\n',
    );
    const renamed = await analyse(
      'trial',
      file,
      '--design',
      'rcbd',
      '--response',
      't',
      '--entry',
      'Sorte',
      '--block',
      'Wdh',
    );
    expect(renamed.lines[0]!.anova.map((row) => row.term)).toEqual(['Wdh', 'Sorte', 'residual']);
    const factorial = await analyse(
      'trial',
      file,
      '--design',
      'factorial',
      '--response',
      't',
      '--factors',
      'a,b',
    );
    expect(factorial.lines[0]!.means.map((mean) => mean.entry)).toEqual(['1:1', '2:1', '1:2', '2:2']);
    expect(Object.keys(factorial.lines[0]!.factors)).toEqual(['a', 'b']);
  });

  it('names the lines of the file that cannot be analysed and exits with 2', async () => {
    const text = await write('text.csv', 'plot,entry,block,yield\n1,A,1,abc\n2,B,1,5\n\n3,A,2,6\n4,B,2,x\n');
    const negative = await write(
      'negative.csv',
      'plot,entry,block,yield\n1,A,1,4\n2,B,1,5\n3,A,2,-6\n4,B,2,7\n',
    );
    const { code, lines } = await analyse('trial', text, negative, '--design', 'rcbd', '--response', 'yield');
    expect(code).toBe(2);
    expect(lines[0]).toMatchObject({ error: { code: 'not-a-number', rows: [2, 6] } });
    expect(lines[1]).toMatchObject({ error: { code: 'negative-value', rows: [4] } });
  });

  it('refuses a missing column, an unknown design, an unknown option and an unknown subject', async () => {
    const file = await write('columns.csv', 'plot,entry,yield\n1,A,4\n2,B,5\n');
    const refusals = await Promise.all([
      analyse('trial', file, '--design', 'rcbd', '--response', 'yield'),
      analyse('trial', file, '--design', 'rows', '--response', 'yield'),
      analyse('trial', file, '--design', 'crd', '--respons', 'yield'),
      analyse('forecast', file),
    ]);
    expect(refusals.map((reply) => reply.code)).toEqual([2, 2, 2, 2]);
    expect(refusals.map((reply) => reply.lines[0]!.error.code)).toEqual([
      'missing-column',
      'unknown-design',
      'bad-option',
      'bad-option',
    ]);
  });
});
