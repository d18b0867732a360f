import type { Language } from './account.ts';
import type { BestOfList, BestStanding } from './question-kind.ts';
import type { Say } from './say-sentences.ts';

type BestKey = `verdicts:best.${'may' | 'all' | 'currentMay' | 'currentNot' | 'thin'}`;

/** Which of a list can be the best, whether the current variety is one of them, and who could not be judged; each a paragraph. */
export function tellBest(
  { standings, thin }: BestOfList,
  current: { id: string; name: string },
  language: Language,
  say: Say<BestKey>,
): string[] {
  const list = new Intl.ListFormat(language, { type: 'conjunction' });
  const may = standings.filter(({ mayBeBest }) => mayBeBest);
  const isSettled = may.length < standings.length;
  const own = standings.find(({ varietyId }) => varietyId === current.id);
  const sentences = [
    say(isSettled ? 'verdicts:best.may' : 'verdicts:best.all', {
      number: standings.length,
      count: may.length,
      names: list.format(may.map(({ varietyName }) => varietyName)),
      sure: Math.round((standings[0]?.interval.level ?? 0) * 100),
    }),
  ];
  if (isSettled && own)
    sentences.push(
      say(own.mayBeBest ? 'verdicts:best.currentMay' : 'verdicts:best.currentNot', { current: current.name }),
    );
  const said = [sentences.join(' ')];
  if (thin.length > 0) said.push(say('verdicts:best.thin', { names: list.format(thin) }));
  return said;
}

type StandingKey = `verdicts:best.${'isBest' | 'mayBe' | 'isNot'}`;

/** Whether a variety of the list can be its best, in a few words. */
export const sayStanding = (
  { isBest, mayBeBest }: Pick<BestStanding, 'isBest' | 'mayBeBest'>,
  say: Say<StandingKey>,
): string => say(`verdicts:best.${isBest ? 'isBest' : mayBeBest ? 'mayBe' : 'isNot'}`);

/** What stands for the standard error of a list's figures, which have none: a quarter of the widest interval, t/ha. */
export const errorOfStandings = (standings: readonly BestStanding[]): number =>
  Math.max(...standings.map(({ interval }) => interval.high - interval.low)) / 4;
