/** Why a check has no result for these data. */
export type CheckGap =
  | 'too-few-values'
  | 'too-many-values'
  | 'no-spread'
  | 'one-group'
  | 'no-residual-df'
  | 'confounded'
  | 'no-neighbours'
  | 'incomplete-blocks';

/** A check's result, or the reason why the data give none. */
export type CheckOutcome<Result> =
  ({ readonly computed: true } & Result) | { readonly computed: false; readonly reason: CheckGap };

/** The outcome of a check that these data do not allow. */
export function notComputed(reason: CheckGap): { readonly computed: false; readonly reason: CheckGap } {
  return { computed: false, reason };
}
