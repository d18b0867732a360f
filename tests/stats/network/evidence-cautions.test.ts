import { describe, expect, it } from 'vitest';
import { weighCandidates } from '#server/stats/network/weigh-candidates.ts';
import type {
  EvidenceCaution,
  EvidenceCautionCode,
  EvidenceNetwork,
  WeighQuestion,
} from '#server/stats/network/weigh-question.ts';
import {
  askAbout,
  changeTrait,
  changeTrials,
  growEvidence,
  usualYield,
} from '#tests/support/sown-network.ts';

const entries = { Now: 0, New: 0.1, Check: 0.05, Fourth: -0.1, Fifth: 0.2, Sixth: 0 };
const good = growEvidence({ entries });
const pair = askAbout(['New']);

/** All cautions of an answer: of the question, the trait and the candidates. */
function cautionsOf(network: EvidenceNetwork, question: WeighQuestion): EvidenceCaution[] {
  const { cautions, traits } = weighCandidates(network, question);
  return [
    ...cautions,
    ...traits.flatMap((trait) => [...trait.cautions, ...trait.candidates.flatMap((row) => row.cautions)]),
  ];
}

const find = (code: EvidenceCautionCode, network: EvidenceNetwork, question: WeighQuestion = pair) =>
  cautionsOf(network, question).find((caution) => caution.code === code);

const onlyIn =
  (entry: string, sites: number, seasons: readonly number[]) => (name: string, s: number, season: number) =>
    name !== entry || (s < sites && seasons.includes(season));

describe('good evidence on one planned pair', () => {
  it('carries no caution', () => {
    expect(cautionsOf(good, pair)).toEqual([]);
  });
});

interface Case {
  readonly code: EvidenceCautionCode;
  readonly severity: EvidenceCaution['severity'];
  readonly numbers: EvidenceCaution['numbers'];
  readonly present: [EvidenceNetwork, WeighQuestion?];
  readonly absent: [EvidenceNetwork, WeighQuestion?];
}

const three = growEvidence({ entries, stands: onlyIn('New', 1, [2022, 2023, 2024]) });
const one = growEvidence({ entries, stands: onlyIn('New', 1, [2024]) });
const four = growEvidence({ entries, stands: onlyIn('New', 2, [2023, 2024]) });
const lastSeason = growEvidence({ entries, stands: onlyIn('New', 4, [2024]) });
const apart = growEvidence({
  entries,
  stands: (entry, s) => (entry === 'New' ? s < 2 : entry === 'Now' ? s >= 2 : true),
});
const byCheck = growEvidence({
  entries,
  stands: (entry, s) => (entry === 'Check' ? true : entry === 'Now' || entry === 'Sixth' ? s >= 2 : s < 2),
});
const cut = growEvidence({
  entries,
  stands: (entry, s) => (entry === 'Now' || entry === 'Sixth' || entry === 'Fifth' ? s >= 2 : s < 2),
});
const oneSeason = growEvidence({ entries, seasons: [2024] });
const wild = growEvidence({ entries, interactionSd: 1.2 });
const at = (site: string, season: number, change: object) =>
  changeTrials(good, (trial) => (trial.site === site && trial.season === season ? change : {}));

const cases: Case[] = [
  {
    code: 'few-site-years',
    severity: 'warning',
    numbers: { variety: 'New', count: 3 },
    present: [three],
    absent: [four],
  },
  {
    code: 'few-site-years',
    severity: 'stop',
    numbers: { variety: 'New', count: 1 },
    present: [one],
    absent: [good],
  },
  {
    code: 'one-season',
    severity: 'warning',
    numbers: { variety: 'New', season: 2024 },
    present: [lastSeason],
    absent: [four],
  },
  {
    code: 'no-trial-in-region',
    severity: 'stop',
    numbers: {},
    present: [changeTrials(good, () => ({ inRegion: false }))],
    absent: [changeTrials(good, ({ season }) => ({ inRegion: season === 2024 }))],
  },
  {
    code: 'old-seasons',
    severity: 'warning',
    numbers: { variety: 'New', season: 2024 },
    present: [good, askAbout(['New'], { askedInSeason: 2028 })],
    absent: [good, askAbout(['New'], { askedInSeason: 2027 })],
  },
  {
    code: 'never-together',
    severity: 'warning',
    numbers: { variety: 'New', current: 'Now' },
    present: [apart],
    absent: [good],
  },
  {
    code: 'linked-through-check',
    severity: 'warning',
    numbers: { variety: 'New', current: 'Now', checks: 'Check' },
    present: [byCheck],
    absent: [apart],
  },
  {
    code: 'disconnected',
    severity: 'stop',
    numbers: { variety: 'New', current: 'Now' },
    present: [cut],
    absent: [byCheck],
  },
  {
    code: 'trial-left-out',
    severity: 'note',
    numbers: { site: 'Site 1', season: 2023, context: 'weak-cv', cv: 22, limit: 15 },
    present: [at('S1', 2023, { cvPercent: 22 })],
    absent: [at('S1', 2023, { cvPercent: 15 })],
  },
  {
    code: 'trial-weak-cv',
    severity: 'warning',
    numbers: { site: 'Site 1', season: 2023, cv: 22, limit: 15 },
    present: [at('S1', 2023, { cvPercent: 22 }), askAbout(['New'], { keepWeakTrials: true })],
    absent: [at('S1', 2023, { cvPercent: 22 })],
  },
  {
    code: 'trial-f-not-significant',
    severity: 'note',
    numbers: { site: 'Site 2', season: 2022, p: 0.3 },
    present: [at('S2', 2022, { entryP: 0.3 })],
    absent: [at('S2', 2022, { entryP: null })],
  },
  {
    code: 'rests-on-usual-variance',
    severity: 'warning',
    numbers: { context: 'crop-default' },
    present: [oneSeason],
    absent: [good],
  },
  {
    code: 'no-usual-variance',
    severity: 'warning',
    numbers: {},
    present: [changeTrait(oneSeason, { usual: null })],
    absent: [oneSeason],
  },
  {
    code: 'several-compared',
    severity: 'note',
    numbers: { count: 2 },
    present: [good, askAbout(['New', 'Fifth'])],
    absent: [good, askAbout(['New'], { kind: 'named' })],
  },
  {
    code: 'management-differs',
    severity: 'warning',
    numbers: { what: 'fungicide' },
    present: [
      changeTrials(good, ({ season }) => ({ management: { fungicide: season === 2024 ? 'no' : 'yes' } })),
    ],
    absent: [changeTrials(good, ({ season }) => (season === 2024 ? { management: {} } : {}))],
  },
  {
    code: 'small-plots',
    severity: 'note',
    numbers: {},
    present: [changeTrials(good, () => ({ plotSize: 'small-plots' }))],
    absent: [good],
  },
  {
    code: 'summary-trial',
    severity: 'note',
    numbers: { count: 4 },
    present: [changeTrials(good, ({ season }) => ({ kind: season === 2022 ? 'summary' : 'plots' }))],
    absent: [good],
  },
];

describe.each(cases)('$code ($severity)', ({ code, severity, numbers, present, absent }) => {
  it('appears with its numbers', () => {
    expect(find(code, ...present)).toEqual({ code, severity, numbers });
  });

  it('keeps away', () => {
    expect(find(code, ...absent)).not.toEqual({ code, severity, numbers });
    if (severity !== 'stop' || code !== 'few-site-years') expect(find(code, ...absent)).toBeUndefined();
  });
});

describe('large-interaction', () => {
  it('appears where varieties change places, with the size of it', () => {
    const found = find('large-interaction', wild);
    expect(found?.severity).toBe('warning');
    expect(Number(found?.numbers['sd'])).toBeGreaterThan(0.6);
  });

  it('keeps away from usual interactions', () => {
    expect(find('large-interaction', good)).toBeUndefined();
  });
});

describe('verdict-changes-with-variance', () => {
  const close = (gap: number) =>
    growEvidence({ entries: { ...entries, New: gap }, seasons: [2023, 2024], sites: 2, interactionSd: 0.05 });
  const verdicts = (gap: number) => weighCandidates(close(gap), pair).traits[0]!.candidates[0]!;

  it('appears exactly where half or twice the usual variances give another verdict', () => {
    const rows = Array.from({ length: 16 }, (_, i) => verdicts(0.2 + i / 10));
    for (const { verdict, sensitivity, cautions } of rows)
      expect(cautions.some(({ code }) => code === 'verdict-changes-with-variance')).toBe(
        sensitivity!.half !== verdict || sensitivity!.double !== verdict,
      );
    expect(rows.some(({ verdict, sensitivity }) => sensitivity!.double !== verdict)).toBe(true);
    expect(rows.some(({ verdict, sensitivity }) => sensitivity!.double === verdict)).toBe(true);
  });
});

describe('best-of-many', () => {
  const question = askAbout(['New', 'Check', 'Fifth', 'Sixth'], { kind: 'best', listSize: 12 });

  it('stands with the leader of a list, its gap beside the shrunken one', () => {
    const [trait] = weighCandidates(good, question).traits;
    const leader = trait!.candidates.reduce((a, b) => (a.gap!.estimate > b.gap!.estimate ? a : b));
    const holders = trait!.candidates.filter(({ cautions }) =>
      cautions.some(({ code }) => code === 'best-of-many'),
    );
    expect(holders).toEqual([leader]);
    const { numbers } = leader.cautions.find(({ code }) => code === 'best-of-many')!;
    expect(numbers).toEqual({
      variety: leader.candidate,
      count: 12,
      estimate: leader.gap!.estimate,
      shrunken: leader.gap!.shrunken.estimate,
    });
    expect(Number(numbers['shrunken'])).toBeLessThan(Number(numbers['estimate']));
  });

  it('keeps away from named candidates', () => {
    expect(find('best-of-many', good, { ...question, kind: 'named' })).toBeUndefined();
  });
});

describe('a variety without a trial', () => {
  it('is told to rest on none, and nothing else', () => {
    const [trait] = weighCandidates(good, askAbout(['Unheard of'])).traits;
    expect(trait!.candidates[0]!.cautions).toEqual([
      { code: 'few-site-years', severity: 'stop', numbers: { variety: 'Unheard of', count: 0 } },
    ]);
  });
});

describe('a verdict from two site-years', () => {
  const twoTrials = growEvidence({ entries, seasons: [2024], stands: (_, s) => s < 2 });
  const contextOf = (network: typeof twoTrials): unknown =>
    find('few-site-years', network)?.numbers['context'];

  it('is said to lean on the usual variances, and is none without them', () => {
    expect(contextOf(twoTrials)).toBe('leans');
    const verdictOf = (network: typeof twoTrials) =>
      weighCandidates(network, pair).traits[0]!.candidates.find(({ candidate }) => candidate === 'New')
        ?.verdict;
    expect(verdictOf(twoTrials)).not.toBe('thin');
    const untold = { ...twoTrials, traits: twoTrials.traits.map((trait) => ({ ...trait, usual: null })) };
    expect(contextOf(untold)).toBeUndefined();
    expect(verdictOf(untold)).toBe('thin');
  });
});

describe('names in cautions', () => {
  it('are those of the network, not its keys', () => {
    const named = { ...three, names: { New: 'Nouvelle', Now: 'Ancienne' } };
    expect(find('few-site-years', named)?.numbers['variety']).toBe('Nouvelle');
  });

  it('tell where the usual variances come from', () => {
    const own = changeTrait(oneSeason, { usual: { ...usualYield, source: 'own-trials' } });
    expect(find('rests-on-usual-variance', own)?.numbers['context']).toBe('own-trials');
  });
});
