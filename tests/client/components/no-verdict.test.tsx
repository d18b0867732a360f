import { screen } from '@testing-library/react';
import { expect, test } from 'vitest';
import { Unanswered } from '#src/components/no-verdict.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildResult, idOf } from '#tests/client/support/weigh-up-factory.ts';

const trial = (n: number, inRegion = true) => ({
  ...{ trialId: idOf(n), name: 'Plots', siteName: 'Elm', season: 2025, version: 1, sha256: '' },
  ...{ meanYield: 5, cvPercent: 6, inRegion, reason: 'ticked-off' as const, reasonText: 'hail' },
});

const show = (leftOut: ReturnType<typeof trial>[], canTakeBack = true) =>
  renderClient(
    <Unanswered
      {...{ crop: { en: 'barley', fr: 'orge' }, region: { en: 'North', fr: 'Nord' }, from: 2023, to: 2025 }}
      result={{ ...buildResult([]), answer: 'no-trials', leftOut }}
      canTakeBack={canTakeBack}
    />,
    { namespaces: ['verdicts'] },
  );

test('a region whose trials are all ticked off is not said to have none; the way back is told where there is one', async () => {
  await show([trial(1), trial(2)]);
  expect(screen.getByText(/All 2 trials of barley in North from 2023 to 2025 were ticked off/)).toBeTruthy();
  expect(screen.queryByText(/has no published trial/)).toBeNull();
  expect(screen.getByText(/Choose “Count it again” for at least one/)).toBeTruthy();
});

test('a reader who cannot take them back is not told to', async () => {
  await show([trial(1)], false);
  expect(screen.getByText(/The only trial of barley/)).toBeTruthy();
  expect(screen.queryByText(/Choose “Count it again”/)).toBeNull();
});

test('a region without trials is said to have none, also where trials of its neighbours are ticked off', async () => {
  await show([trial(1, false)]);
  expect(screen.getByText(/North has no published trial of barley/)).toBeTruthy();
});
