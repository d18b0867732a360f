import { screen } from '@testing-library/react';
import { expect, it } from 'vitest';
import type { LeftOutTrial } from '#shared/weigh-up.ts';
import { WeighUpHeading } from '#src/features/weigh-up/weigh-up-heading.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildResult, buildWeighUp, idOf } from '#tests/client/support/weigh-up-factory.ts';

const leftOut = (n: number, reason: LeftOutTrial['reason']): LeftOutTrial => ({
  ...{ trialId: idOf(n), name: 'Elmgate 2025', siteName: 'Elmgate', season: 2025, version: 1 },
  ...{ sha256: 'ab', meanYield: 4.2, cvPercent: 7, reason },
});

it.each([
  ['en', /figures of 1 December 2026 · 2 trials ticked off$/],
  ['fr', /chiffres du 1er décembre 2026 · 2 essais décochés$/],
] as const)('says over the answer how many trials were ticked off (%s)', async (language, words) => {
  const result = buildResult([buildCandidate()]);
  const out = [leftOut(50, 'ticked-off'), leftOut(51, 'no-variance'), leftOut(52, 'ticked-off')];
  await renderClient(<WeighUpHeading weighUp={buildWeighUp()} result={{ ...result, leftOut: out }} />, {
    language,
    namespaces: ['weigh-up', 'verdicts', 'method'],
  });
  expect(screen.getByText(words)).toBeTruthy();
});

it('says nothing of it where all trials count', async () => {
  await renderClient(<WeighUpHeading weighUp={buildWeighUp()} result={buildResult([buildCandidate()])} />, {
    namespaces: ['weigh-up', 'verdicts', 'method'],
  });
  expect(screen.getByText(/figures of 1 December 2026$/)).toBeTruthy();
});
