import { AnalysisError } from '#server/stats/analysis-error.ts';
import { printError } from './read-table.ts';

type Run = (args: readonly string[]) => Promise<number>;

// loaded on demand: a command should start at once
const runs: Record<string, () => Promise<Run>> = {
  trial: async () => (await import('./analyse-trial.ts')).runTrial,
  network: async () => (await import('./analyse-network.ts')).runNetwork,
  pair: async () => (await import('./analyse-pair.ts')).runPair,
};

// The engine's command line: `analyse trial|network|pair FILE.csv… [options]`. One JSON object a file on stdout;
// exit 2 and `{"error": …}` for data that cannot be analysed.
const [subject = '', ...args] = process.argv.slice(2);
const load = Object.hasOwn(runs, subject) ? runs[subject] : undefined;
if (load) {
  process.exitCode = await (await load())(args);
} else {
  printError(new AnalysisError('bad-option', 'say trial, network or pair, then a file'));
  process.exitCode = 2;
}
