import { expect, it } from 'vitest';
import { weighCandidates } from '#server/stats/network/weigh-candidates.ts';
import { askAbout, changeTrials, growEvidence } from '#tests/support/sown-network.ts';

const network = growEvidence({ entries: { Now: 0, Best: 1.2, Like: 0.02, Other: 0 }, sites: 5 });
const elsewhere = changeTrials(network, () => ({ inRegion: false }));
const accepting = askAbout(['Best'], { acceptsOtherRegions: true });

it('trials of other regions answer alone only where they are accepted', () => {
  expect(weighCandidates(elsewhere, askAbout(['Best'])).answer).toBe('no-trials');
  expect(weighCandidates(elsewhere, accepting).answer).toBe('weighed');
});

it('a trial counts alike wherever it stood: the mark changes no figure', () => {
  expect(weighCandidates(elsewhere, accepting)).toEqual(weighCandidates(network, accepting));
});

it('without any trial there is nothing to accept', () => {
  const none = { ...accepting, seasons: { from: 1990, to: 1999 } };
  expect(weighCandidates(elsewhere, none)).toMatchObject({
    answer: 'no-trials',
    cautions: [{ code: 'no-trial-in-region', severity: 'stop' }],
  });
});
