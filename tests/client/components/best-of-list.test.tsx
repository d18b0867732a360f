import { screen, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { Language } from '#shared/account.ts';
import type { BestOfList } from '#shared/question-kind.ts';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { currentId, idOf } from '#tests/client/support/weigh-up-factory.ts';

const row = (varietyId: string, varietyName: string, estimate: number, high: number) => ({
  ...{ varietyId, varietyName, estimate },
  interval: { low: high - 0.6, high, level: 0.95 },
  ...{ mayBeBest: high > 0, isBest: false },
});

const show = (best: BestOfList, language: Language = 'en') =>
  renderClient(<BestOfListAnswer best={best} currentId={currentId} currentName="Brindle" />, {
    language,
    namespaces: ['verdicts', 'drawings'],
  });

const ostermoor = row(idOf(2), 'Ostermoor', 0.2, 0.5);
const sorrel = row(idOf(3), 'Sorrel', -0.2, 0.1);
const brindle = row(currentId, 'Brindle', -0.7, 0);

test('who can be the best is named, with whether the current variety can, and how sure that is', async () => {
  await show({ standings: [ostermoor, sorrel, brindle], thin: ['Larkhollow'] });
  expect(screen.getByText(/Of the 3 varieties/).textContent).toBe(
    'Of the 3 varieties with enough trials, 2 can be the best: Ostermoor and Sorrel. The others are shown not to be: ' +
      'in 95 of 100 such lists, the true best is among those named so. Brindle, sown today, is not one of them.',
  );
  expect(screen.getByText('Too few trials to rule in or out: Larkhollow.')).toBeTruthy();
  const rows = within(screen.getByRole('table', { hidden: true })).getAllByRole('row', { hidden: true });
  expect(rows.at(-1)?.textContent).toMatch(/Brindle.*−0\.7\d?\st\/ha.*Shown not to be/);
});

test('the current variety may be one of them', async () => {
  await show({
    standings: [
      { ...brindle, mayBeBest: true },
      { ...sorrel, mayBeBest: false },
    ],
    thin: [],
  });
  expect(screen.getByText(/only Brindle can be the best/).textContent).toContain(
    'Brindle, sown today, is one of those that can be.',
  );
  expect(screen.queryByText(/Too few trials/)).toBeNull();
});

test('where nothing can be ruled out, that is said, in French as well', async () => {
  await show({ standings: [ostermoor, sorrel], thin: [] }, 'fr');
  expect(screen.getByText(/Aucune des 2 variétés/).textContent).toContain('ces essais ne tranchent pas');
});
