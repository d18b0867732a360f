import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { weighMoney } from '#shared/partial-budget.ts';
import { CandidateStory } from '#src/components/candidate-story.tsx';
import { CandidateStrip } from '#src/features/weigh-up/candidate-strip.tsx';
import { TableCandidate } from '#src/features/weigh-up/table-candidate.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { assumptions, basis, buildCandidate, buildGap } from '#tests/client/support/weigh-up-factory.ts';

/** Seed costs 30 more per hectare, so that the candidate pays from a gap of 0.11 t/ha on. */
function buildPulledBack(estimate: number, pulledBackTo: number) {
  const candidate = buildCandidate({ gap: buildGap(estimate, 0.6), verdict: 'open' });
  const moneyGap = { estimate: pulledBackTo, se: 0.4, df: 20 };
  const money = weighMoney({ ...candidate, moneyGap }, basis, assumptions);
  return { ...candidate, moneyGap, money };
}

const words = /on a gap pulled back to \+0\.0[0-9] t\/ha/;

const showRow = (candidate: ReturnType<typeof buildPulledBack>) =>
  renderClient(
    <CandidateStrip candidates={[candidate]} currentName="Brindle" money={assumptions} areaHectares={120} />,
    { namespaces: ['verdicts', 'drawings'] },
  );

describe('a return that the drawn tick seems to contradict', () => {
  it('says on which gap it is reckoned, in the row and in the table view', async () => {
    const candidate = buildPulledBack(0.2, 0.05);
    expect(candidate.money?.returnPerHectare).toBeLessThan(0);
    const row = await showRow(candidate);
    expect(screen.getByText(words)).toBeTruthy();
    row.unmount();
    await renderClient(<TableCandidate candidate={candidate} currentName="Brindle" money={assumptions} />, {
      namespaces: ['verdicts', 'weigh-up'],
    });
    expect(screen.getByText(words)).toBeTruthy();
  });

  it('is told of the gap that it is reckoned on, not of the estimate', async () => {
    const candidate = buildPulledBack(0.2, 0.05);
    await renderClient(
      <CandidateStory
        candidate={candidate}
        currentName="Brindle"
        money={assumptions}
        areaHectares={120}
        unit="t/ha"
        decimals={2}
      />,
      { namespaces: ['verdicts'] },
    );
    expect(screen.getByText(/a gap of \+0\.05 t\/ha returns −/)).toBeTruthy();
  });

  it.each([
    ['both pay', 0.4, 0.3],
    ['neither pays', 0.05, 0.01],
    ['neither yields more', -0.3, -0.1],
  ])('is not spoken of where %s', async (_, estimate, pulledBackTo) => {
    await showRow(buildPulledBack(estimate, pulledBackTo));
    expect(screen.queryByText(/pulled back/)).toBeNull();
  });
});
