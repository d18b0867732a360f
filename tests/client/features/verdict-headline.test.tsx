import { describe, expect, it } from 'vitest';
import { buildHeadline } from '#shared/headline.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildGap, idOf } from '#tests/client/support/weigh-up-factory.ts';

const withChance = (candidate: CandidateResult, chancePays: number | null): CandidateResult => ({
  ...candidate,
  money: candidate.money && { ...candidate.money, chancePays },
});

const ostermoor = withChance(buildCandidate(), 0.912);
const tallis = buildCandidate({
  varietyId: idOf(3),
  varietyName: 'Tallis',
  verdict: 'open',
  gap: buildGap(0.2, 0.5),
});
const corvane = buildCandidate({ varietyId: idOf(4), varietyName: 'Corvane', verdict: 'level' });
const haverill = buildCandidate({ varietyId: idOf(5), varietyName: 'Haverill Bay', verdict: 'thin' });

async function readHeadline(candidates: CandidateResult[], language: 'en' | 'fr'): Promise<string> {
  const { container } = await renderClient(
    <VerdictHeadline candidates={candidates} currentName="Brindle" />,
    { language, namespaces: ['verdicts'] },
  );
  return container.textContent?.trim() ?? '';
}

describe('the headline of a weigh-up', () => {
  it('says who is really ahead and how often that pays, then what is open, level and thin', async () => {
    expect(await readHeadline([ostermoor, tallis, corvane, haverill], 'en')).toBe(
      'Ostermoor is really ahead of Brindle, and pays on your own land in 91 of 100 seasons. ' +
        'Tallis looks ahead, but 14 trials do not settle it. Corvane is neck and neck with Brindle. ' +
        'For Haverill Bay there are too few trials to say.',
    );
  });

  it('says the same in French', async () => {
    expect(await readHeadline([ostermoor, tallis], 'fr')).toBe(
      'Ostermoor est réellement devant Brindle, et rapporte davantage chez vous dans 91 saisons sur 100. ' +
        'Tallis semble devant, mais 14 essais ne suffisent pas à trancher.',
    );
  });

  it('joins candidates of the same verdict in one sentence of the plural', async () => {
    const both = [corvane, { ...corvane, varietyId: idOf(6), varietyName: 'Merrow' }];
    expect(await readHeadline(both, 'en')).toBe(
      'No candidate is really ahead of Brindle. Corvane and Merrow are neck and neck with Brindle.',
    );
  });

  it('says how few and how many trials leave several candidates open', async () => {
    const few = { ...tallis, varietyId: idOf(7), varietyName: 'Lindel', siteYears: 2 };
    expect(await readHeadline([tallis, few], 'en')).toContain(
      'Tallis and Lindel look ahead, but 2 to 14 trials do not settle it.',
    );
    expect(await readHeadline([tallis, few], 'fr')).toContain('mais 2 à 14 essais ne suffisent pas');
  });

  it('names those that are ahead and pay in one sentence, with the chances of all of them', async () => {
    const named = (name: string, chance: number | null) => ({
      ...withChance(buildCandidate(), chance),
      varietyId: idOf(name.length + 10),
      varietyName: name,
    });
    const four = [named('Ada', 0.916), named('Bryn', 0.887), named('Corin', 0.45), named('Dunstan', null)];
    expect(await readHeadline(four, 'en')).toBe(
      'Ada and Bryn are really ahead of Brindle, and pay on your own land in 89 to 92 of 100 seasons. ' +
        'Corin is really ahead of Brindle, but pays on your own land in only 45 of 100 seasons. ' +
        'Dunstan is really ahead of Brindle; what that is worth cannot be said yet.',
    );
    const alike = [named('Ada', 0.914), named('Bryn', 0.906)];
    expect(await readHeadline(alike, 'fr')).toBe(
      'Ada et Bryn sont réellement devant Brindle, et rapportent davantage chez vous dans 91 saisons sur 100.',
    );
  });

  it('does not let "really ahead" sound like money when it seldom pays', async () => {
    expect(await readHeadline([withChance(ostermoor, 0.41)], 'en')).toContain(
      'but pays on your own land in only 41 of 100 seasons',
    );
    expect(await readHeadline([withChance(ostermoor, null)], 'en')).toContain('cannot be said yet');
  });

  it('never says none or all of a hundred seasons', async () => {
    expect(await readHeadline([withChance(ostermoor, 1)], 'en')).toContain('more than 99 of 100 seasons');
    expect(await readHeadline([withChance(ostermoor, 0)], 'fr')).toContain('moins de 1 saison sur 100');
  });

  it('names every candidate exactly once', () => {
    const candidates = [ostermoor, tallis, corvane, haverill, { ...tallis, verdict: 'behind' as const }];
    const named = buildHeadline(candidates).flatMap((part) => part.names);
    expect(named.sort()).toEqual(candidates.map((candidate) => candidate.varietyName).sort());
  });
});
