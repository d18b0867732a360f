import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { SiteLines } from '#src/components/site-lines.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

const trial = (siteName: string, trialMean: number, estimate: number) => ({
  trialId: siteName,
  siteName,
  season: 2026,
  trialMean,
  estimate,
  interval: { low: estimate - 0.4, high: estimate + 0.4, level: 0.95 },
});

describe('the site lines', () => {
  it('draw one line per trial, the poorest site first', async () => {
    await renderClient(
      <SiteLines
        candidateName="Ostermoor"
        currentName="Brindle"
        trials={[trial('Rich', 6.1, 0.5), trial('Poor', 2.9, -0.2), trial('Middling', 4.4, 0.1)]}
        unit="t/ha"
        decimals={2}
      />,
    );
    const sentences = screen.getAllByRole('img').map((line) => line.getAttribute('aria-label') ?? '');
    expect(sentences.map((sentence) => sentence.split(',')[0])).toEqual(['Poor', 'Middling', 'Rich']);
    expect(sentences[0]).toBe(
      'Poor, 2026, mean yield 2.90\u00a0t/ha: gap \u22120.20\u00a0t/ha, between \u22120.60\u00a0t/ha and +0.20\u00a0t/ha (95% interval).',
    );
  });
});
