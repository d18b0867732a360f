import type { TrialDesign } from '#shared/trial.ts';
import type { ColumnField } from './match-columns.ts';

/** What a design cannot do without: of each group one column, filled in on every row. */
export const neededPlaces: Record<TrialDesign, readonly (readonly ColumnField[])[]> = {
  crd: [],
  rcbd: [['block', 'rep']],
  strips: [['block', 'rep']],
  'latin-square': [['row'], ['col']],
  'incomplete-blocks': [['block']],
  'row-column': [['row'], ['col']],
  'split-plot': [['main'], ['block', 'rep']],
  factorial: [],
};
