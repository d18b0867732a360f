import type { FarmRange } from './farm.ts';
import type { Say } from './say-sentences.ts';
import type { VerdictCode } from './verdict.ts';
import type { CandidateResult, WeighUpResult } from './weigh-up.ts';

type MethodKey =
  | `method:${'trials' | 'sites' | 'oneSeason' | 'seasons' | 'dunnett' | 'lsd' | 'pair' | 'best' | 'twoTargets' | 'twoTargetsSites' | 'components' | 'usualFactor'}`
  | `method:from.${'crop-default' | 'own-trials'}`
  | `method:sensitivity.${'holds' | 'changes' | 'line'}`
  | `method:${'farm' | 'farmAlike' | 'money' | 'calibration' | 'computed'}`
  | 'verdicts:trialCount'
  | `common:verdict.${VerdictCode}`;

/** How figures are written in the reader's language. */
type MethodFigures = {
  number: (value: number, style?: { decimals: number }) => string;
  quantity: (value: number, unit: string, style: { decimals: number }) => string;
  date: (iso: string) => string;
  dateTime: (iso: string) => string;
};

/** A paragraph, with the items that follow it where it announces a list; `mark` is what is set small. */
export type MethodPart = { kind: 'method' | 'sensitivity' | 'mark'; text: string; items: string[] };

/** How the figures were made, in sentences, with what they rest on. */
export function tellMethod(result: WeighUpResult, say: Say<MethodKey>, write: MethodFigures): MethodPart[] {
  const from = Math.min(...result.seasons);
  const to = Math.max(...result.seasons);
  const paragraph = (text: string): MethodPart => ({ kind: 'method', text, items: [] });
  return [
    paragraph(
      say('method:trials', {
        trials: say('verdicts:trialCount', { count: result.trials.length }),
        sites: say('method:sites', { count: result.sites }),
        seasons:
          from === to ? say('method:oneSeason', { season: from }) : say('method:seasons', { from, to }),
      }),
    ),
    ...(result.farmRange ? [paragraph(sayFarm(result.farmRange, say, write))] : []),
    paragraph(say(`method:${nameComparison(result)}`)),
    paragraph(
      say(
        result.trials.some(({ inRegion }) => inRegion === false)
          ? 'method:twoTargetsSites'
          : 'method:twoTargets',
      ),
    ),
    ...(result.components ? [paragraph(sayComponents(result, result.components, say, write))] : []),
    ...tellSensitivity(result.candidates, say),
    paragraph(say('method:money')),
    paragraph(say('method:calibration')),
    {
      kind: 'mark',
      text: say('method:computed', { at: write.dateTime(result.computedAt), engine: result.engineVersion }),
      items: [],
    },
  ];
}

/** The comparison by the question that called for it. */
function nameComparison({ question, comparison }: WeighUpResult): 'pair' | 'best' | 'dunnett' | 'lsd' {
  return question === 'pair' || question === 'best' ? question : comparison;
}

function sayComponents(
  { usualVariancesFrom, usualVariancesAt, usualFactor }: WeighUpResult,
  components: NonNullable<WeighUpResult['components']>,
  say: Say<MethodKey>,
  write: MethodFigures,
): string {
  const spread = (value: number) => write.quantity(value, 't/ha', { decimals: 2 });
  const moves = say('method:components', {
    site: spread(components.site),
    season: spread(components.season),
    rest: spread(components.rest),
  });
  if (usualVariancesFrom === null) return moves;
  const date = usualVariancesAt ? write.date(usualVariancesAt) : '';
  const from = `${moves} ${say(`method:from.${usualVariancesFrom}`, { date })}`;
  if (usualFactor === null || usualFactor === undefined) return from;
  return `${from} ${say('method:usualFactor', { times: write.number(usualFactor, { decimals: 1 }) })}`;
}

/** What the verdicts would be, were the usual variances half or twice what they are taken for. */
function tellSensitivity(candidates: readonly CandidateResult[], say: Say<MethodKey>): MethodPart[] {
  const varied = candidates.flatMap(({ varietyName: variety, verdict, sensitivity }) =>
    sensitivity?.half && sensitivity.double
      ? [{ variety, verdict, half: sensitivity.half, double: sensitivity.double }]
      : [],
  );
  if (varied.length === 0) return [];
  const changing = varied.filter(({ verdict, half, double }) => half !== verdict || double !== verdict);
  if (changing.length === 0) {
    return [{ kind: 'sensitivity', text: say('method:sensitivity.holds'), items: [] }];
  }
  const word = (verdict: VerdictCode) => say(`common:verdict.${verdict}`);
  const items = changing.map(({ variety, verdict, half, double }) =>
    say('method:sensitivity.line', {
      ...{ variety, verdict: word(verdict), half: word(half), double: word(double) },
    }),
  );
  return [{ kind: 'sensitivity', text: say('method:sensitivity.changes'), items }];
}

/** How far the farm is from where the figures were grown, in km and in kind. */
function sayFarm(range: FarmRange, say: Say<MethodKey>, write: MethodFigures): string {
  const distance = say('method:farm', {
    distance: write.quantity(range.nearestKm, 'km', { decimals: 0 }),
    site: range.nearestSite,
  });
  if (range.similarSites === null) return distance;
  const alike = { count: range.similarSites, sites: write.number(range.sites) };
  return `${distance} ${say('method:farmAlike', alike)}`;
}
