import { sayChance, type SpokenChance } from './format-number.ts';
import type { Say } from './say-sentences.ts';

type ChanceKey<Words extends string> = `verdicts:${Words}.${SpokenChance['key']}`;

/** Says a chance as seasons of a hundred: `91 of 100 seasons`, `fewer than 1 of 100 seasons`. */
export function saySeasons(chance: number, say: Say<ChanceKey<'seasons'>>): string {
  const { key, count } = sayChance(chance);
  return key === 'whole' ? say('verdicts:seasons.whole', { count }) : say(`verdicts:seasons.${key}`);
}

/** Says the chances of several: `89 to 92 of 100 seasons`, or one of them where they are said alike. */
export function saySeasonSpan(
  { least, greatest }: { least: number; greatest: number },
  say: Say<ChanceKey<'seasons'> | 'verdicts:seasons.span'>,
): string {
  const [from, to] = [sayChance(least), sayChance(greatest)];
  if (from.count === to.count) return saySeasons(least, say);
  return say('verdicts:seasons.span', { from: from.count, to: to.count });
}

/** Says beside a strip how often a candidate pays, in as few words as fit there: `pays in 91 of 100`. */
export function sayPaysIn(chance: number, say: Say<ChanceKey<'paysIn'>>): string {
  const { key, count } = sayChance(chance);
  return key === 'whole' ? say('verdicts:paysIn.whole', { count }) : say(`verdicts:paysIn.${key}`);
}
