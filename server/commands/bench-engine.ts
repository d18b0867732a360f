import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { timeTask, type BenchSuite, type BenchTask } from './bench/bench-task.ts';
import { networkSuite } from './bench/network-suite.ts';
import { benchRequests } from './bench/request-suite.ts';
import { trialSuite } from './bench/trial-suite.ts';

// Engine and R on the same work, side by side: medians in warm processes. `--no-r` leaves R out, `--requests` all but
// the whole request on a PostgreSQL of its own.
const suites: readonly BenchSuite[] = process.argv.includes('--requests') ? [] : [trialSuite, networkSuite];

const scripts = fileURLToPath(new URL('./bench/', import.meta.url));
const hasR = !process.argv.includes('--no-r') && spawnSync('Rscript', ['--version']).status === 0;
if (!hasR) console.log('Rscript is not there: the engine alone.\n');

for (const suite of suites) {
  console.log(`## ${suite.title}\n`);
  console.log('| work | engine ms | R ms | times faster | held to | met |');
  console.log('|---|---|---|---|---|---|');
  const seconds = hasR ? timeInR(suite) : new Map<string, number>();
  for (const task of suite.tasks) console.log(describeRow(task, timeTask(task), seconds.get(task.key)));
  console.log('');
}
await benchRequests(fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, ''));

/** Median seconds by key, from the suite's R script. */
function timeInR(suite: BenchSuite): Map<string, number> {
  if (suite.script === null) return new Map();
  const folder = mkdtempSync(path.join(tmpdir(), 'gavelrow-bench-'));
  try {
    suite.writeData(folder);
    const done = spawnSync('Rscript', [path.join(scripts, suite.script), folder], { encoding: 'utf8' });
    if (done.status !== 0) console.error(done.stderr);
    const pairs = done.stdout
      .split('\n')
      .filter((line) => line.trim() !== '')
      .map((line) => line.trim().split(' '));
    return new Map(pairs.map(([key, value]) => [key ?? '', Number(value)]));
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function describeRow(task: BenchTask, ms: number, seconds: number | undefined): string {
  const { ratio, ms: limit } = task.target ?? {};
  const faster = seconds === undefined ? null : (1000 * seconds) / ms;
  const target = ratio ? `${ratio} × R` : limit ? `${limit} ms` : '';
  let met = '';
  if (limit !== undefined) met = ms <= limit ? 'yes' : 'NO';
  else if (ratio !== undefined && faster !== null) met = faster >= ratio ? 'yes' : 'NO';
  const cells = [
    task.label,
    ms.toPrecision(3),
    seconds === undefined ? '' : (1000 * seconds).toPrecision(3),
    faster === null ? '' : faster.toFixed(0),
    target,
    met,
  ];
  return `| ${cells.join(' | ')} |`;
}
