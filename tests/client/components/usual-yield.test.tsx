import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { IntervalSentences } from '#src/components/candidate-story.tsx';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { SiteLines } from '#src/components/site-lines.tsx';
import { UsualYieldSentences } from '#src/components/usual-yield-sentences.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildResult, idOf } from '#tests/client/support/weigh-up-factory.ts';

const line = {
  trials: 9,
  centre: 5,
  gapAtCentre: 0.2,
  gapSe: 0.05,
  slope: 0.31,
  slopeSe: 0.1,
  df: 7,
  slopeP: 0.017,
  tau2: 0,
  from: 3.9,
  to: 6.2,
};
const interval = { low: -0.08, high: 0.24, level: 0.95 };
const read = { usualYield: 4.6, estimate: 0.08, se: 0.07, df: 7, interval, isCarried: true };

const tell = (change: Partial<CandidateResult>) =>
  renderClient(<UsualYieldSentences candidate={buildCandidate(change)} unit="t/ha" decimals={2} />, {
    at: '/',
    namespaces: ['verdicts'],
  });

const text = () => document.body.textContent.replaceAll('\u00a0', ' ');

describe('the gap at the usual yield', () => {
  it('is told with its interval, its level and what it is of', async () => {
    await tell({ gapLine: line, gapAtUsualYield: read });
    expect(text()).toContain(
      'On fields that yield about 4.6 t/ha, the line through 9 trials gives a gap of +0.08 t/ha',
    );
    expect(text()).toContain(
      'between \u22120.08 and +0.24 t/ha (95% interval for the average field of that yield, this pair alone)',
    );
    expect(text()).toContain('the gap changes with the yield of the field: +0.31 t/ha');
  });

  it('claims no slope where the trials show none', async () => {
    await tell({ gapLine: { ...line, slopeP: 0.4 }, gapAtUsualYield: read });
    expect(text()).toContain('is not settled (p 0.40)');
    expect(text()).not.toContain('the gap changes');
  });

  it('is not told where the trials do not reach, nor where nobody has said the yield', async () => {
    await tell({ gapLine: line, gapAtUsualYield: { ...read, isCarried: false } });
    await tell({ gapLine: line, gapAtUsualYield: null });
    expect(text()).not.toContain('On fields that yield');
  });
});

describe('trials of other regions', () => {
  const trial = (id: number, inRegion: boolean) => ({
    trialId: idOf(id),
    siteName: inRegion ? 'Haverlin' : 'Brasque',
    season: 2025,
    inRegion,
  });

  it('keep the interval from being called the region’s average', async () => {
    const gap = { trialMean: 5, estimate: 0.1, interval };
    const sentences = (inRegion: boolean) => (
      <IntervalSentences
        gap={buildCandidate().gap}
        trials={[{ ...trial(1, inRegion), ...gap }]}
        unit="t/ha"
        decimals={2}
      />
    );
    const { unmount } = await renderClient(sentences(true), { at: '/', namespaces: ['verdicts'] });
    expect(text()).toContain('For the region’s average');
    unmount();
    await renderClient(sentences(false), { at: '/', namespaces: ['verdicts'] });
    expect(text()).toContain('some of them in other regions');
    expect(text()).not.toContain('For the region’s average');
  });

  it('are marked in the lines per trial', async () => {
    const gap = { trialMean: 5, estimate: 0.1, interval };
    await renderClient(
      <SiteLines
        candidateName="Ostermoor"
        currentName="Brindle"
        trials={[
          { ...trial(1, true), ...gap },
          { ...trial(2, false), ...gap },
        ]}
        unit="t/ha"
        decimals={2}
      />,
      { at: '/', namespaces: ['drawings'] },
    );
    const items = screen.getAllByRole('listitem').map((item) => item.textContent);
    expect(items.filter((words) => words.includes('another region'))).toEqual([
      expect.stringContaining('Brasque'),
    ]);
  });

  it('are marked with their region in the list of trials, and the farm’s distance is told', async () => {
    const facts = { name: '', version: 1, sha256: 'a', meanYield: 5, cvPercent: 6 };
    const result = {
      ...buildResult([]),
      trials: [
        { ...trial(1, true), ...facts },
        { ...trial(2, false), ...facts, regionName: { en: 'Orlaine Plateau', fr: 'Plateau d’Orlaine' } },
      ],
      farmRange: {
        sites: 2,
        nearestSite: 'Haverlin',
        nearestKm: 23.4,
        standardisedDistance: 0.8,
        similarSites: 1,
      },
    };
    await renderClient(
      <>
        <EvidenceTrials result={result} />
        <MethodNotes result={result} />
      </>,
      { at: '/', namespaces: ['method', 'verdicts'] },
    );
    expect(screen.getAllByText('another region: Orlaine Plateau')).not.toHaveLength(0);
    expect(text()).toContain('The farm lies 23 km from the nearest of these sites, Haverlin.');
    expect(text()).toContain('It is like 1 of the 2 sites');
  });
});
