import { screen } from '@testing-library/react';
import { expect, test } from 'vitest';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildResult, idOf } from '#tests/client/support/weigh-up-factory.ts';

const namespaces = ['method', 'verdicts'] as const;
const holding = buildCandidate({ sensitivity: { half: 'ahead', double: 'ahead' } });
const changing = buildCandidate({ varietyName: 'Sorrel', sensitivity: { half: 'ahead', double: 'open' } });

const show = (result: ReturnType<typeof buildResult>) =>
  renderClient(<MethodNotes result={result} />, { namespaces: [...namespaces] });

test('verdicts that stand with the usual variances halved and doubled are said to stand', async () => {
  await show(buildResult([holding]));
  expect(screen.getByText(/halved or doubled, every verdict stays as it is/)).toBeTruthy();
  expect(screen.queryByRole('listitem')).toBeNull();
});

test('a verdict that changes is named with what it would be', async () => {
  await show(buildResult([holding, changing]));
  const [line, ...others] = screen.getAllByRole('listitem').map((item) => item.textContent);
  expect(line).toBe('Sorrel: Really ahead when halved, Not settled when doubled; now Really ahead.');
  expect(others).toEqual([]);
});

test('without usual variances nothing is said of them', async () => {
  await show(buildResult([buildCandidate({ sensitivity: null })]));
  expect(screen.queryByText(/halved or doubled/)).toBeNull();
});

test('own variances are told with the day they were estimated', async () => {
  const own = { usualVariancesFrom: 'own-trials', usualVariancesAt: '2026-11-02T09:00:00.000Z' } as const;
  await show({ ...buildResult([holding]), ...own });
  expect(screen.getByText(/as estimated on 2 November 2026/)).toBeTruthy();
});

test('how much varieties moved here against what is usual is told, where it is known', async () => {
  await show({ ...buildResult([holding]), usualFactor: 1.42 });
  expect(screen.getByText(/In these trials they moved 1\.4 times as much as is usual/)).toBeTruthy();
});

test.each([
  [{ question: 'several', comparison: 'dunnett' }, /Several candidates are compared .* Dunnett/],
  [{ question: 'several', comparison: 'lsd' }, /^One candidate is compared with one variety/],
  [{ question: 'pair', comparison: 'lsd' }, /chosen before its results were looked at/],
  [{ question: 'best', comparison: 'dunnett' }, /The best was looked for in the whole list/],
  // A copy made before there was a choice.
  [{ comparison: 'dunnett' }, /Several candidates are compared/],
] as const)('the comparison is said with its reason: %o', async (asked, sentence) => {
  await show({ ...buildResult([holding]), ...asked });
  expect(screen.getByText(sentence)).toBeTruthy();
});

test('the average is the region’s only where its trials alone stand behind the figures', async () => {
  const trial = { trialId: idOf(5), name: 'Plots', siteName: 'Elm', season: 2025, version: 1, sha256: '' };
  const used = { ...trial, meanYield: 5, cvPercent: 6 };
  await show({ ...buildResult([holding]), trials: [used, { ...used, inRegion: false }] });
  expect(screen.getByText(/the average over the sites and seasons of these trials/)).toBeTruthy();
  expect(screen.queryByText(/the region’s average/)).toBeNull();
});
