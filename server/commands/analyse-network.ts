import { AnalysisError } from '#server/stats/analysis-error.ts';
import { printError } from './read-table.ts';

export async function runNetwork(_args: readonly string[]): Promise<number> {
  printError(new AnalysisError('bad-option', 'not there yet'));
  return 2;
}
