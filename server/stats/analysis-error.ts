/** Why data cannot be analysed. The client turns the code into a sentence; `message` is for logs and the command line. */
export type AnalysisErrorCode =
  | 'no-values'
  | 'one-plot'
  | 'one-entry'
  | 'missing-column'
  | 'missing-level'
  | 'not-a-number'
  | 'not-finite'
  | 'negative-value'
  | 'value-out-of-range'
  | 'duplicate-plot'
  | 'duplicate-position'
  | 'unknown-check'
  | 'unknown-entry'
  | 'unknown-design'
  | 'too-large'
  | 'bad-option'
  | 'unreadable-file'
  | 'duplicate-cell'
  | 'bad-variance'
  | 'disconnected';

/**
 * Data or a question that the engine refuses, with the rows at fault.
 * `rows` counts from 1 in the order given (a command that reads a file turns them into line numbers).
 */
export class AnalysisError extends Error {
  readonly code: AnalysisErrorCode;
  readonly rows: readonly number[];

  constructor(code: AnalysisErrorCode, message: string, rows: readonly number[] = []) {
    super(message);
    this.name = 'AnalysisError';
    this.code = code;
    this.rows = rows;
  }
}
