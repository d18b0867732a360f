import type { BilingualName } from '#shared/catalogue.ts';
import type { WeighUpLine } from '#shared/weigh-up.ts';
import { readChoice } from '#src/url-state.ts';
import { matchesWords } from './match-words.ts';

/** Which weigh-ups are listed; all of it stands in the address. An empty word asks for all. */
export type WeighUpFilter = {
  search: string;
  /** English name of the crop and of the region: a name is what one reads in an address. */
  crop: string;
  region: string;
  /** A season that the weigh-up's span holds. */
  season: string;
  decided: 'all' | 'yes' | 'no';
  shown: 'open' | 'archived';
};

/** The parameters of the address that stand for a filter, emptied. */
export const noFilter = { q: null, crop: null, region: null, season: null, decided: null, shown: null };

export function readWeighUpFilter(search: URLSearchParams): WeighUpFilter {
  return {
    search: search.get('q') ?? '',
    crop: search.get('crop') ?? '',
    region: search.get('region') ?? '',
    season: search.get('season') ?? '',
    decided: readChoice(search, 'decided', ['all', 'yes', 'no']),
    shown: readChoice(search, 'shown', ['open', 'archived']),
  };
}

type SearchedLine = Pick<
  WeighUpLine,
  'growerName' | 'farmName' | 'currentVarietyName' | 'cropName' | 'regionName'
> & { decision: Pick<NonNullable<WeighUpLine['decision']>, 'varietyName'> | null };

/** Whether every word searched for is somewhere in the line, accents and case aside. */
export function matchesSearch(line: SearchedLine, search: string): boolean {
  const names = [line.cropName.en, line.cropName.fr, line.regionName.en, line.regionName.fr];
  const varieties = [line.currentVarietyName, line.decision?.varietyName ?? ''];
  return matchesWords([line.growerName, line.farmName, ...varieties, ...names].join(' '), search);
}

/** Whether a line is asked for. */
export function passesFilter(line: WeighUpLine, filter: WeighUpFilter): boolean {
  const season = Number(filter.season);
  return (
    (line.archivedAt !== null) === (filter.shown === 'archived') &&
    (filter.crop === '' || line.cropName.en === filter.crop) &&
    (filter.region === '' || line.regionName.en === filter.region) &&
    (filter.season === '' || (line.seasonFrom <= season && season <= line.seasonTo)) &&
    (filter.decided === 'all' || (line.decision !== null) === (filter.decided === 'yes')) &&
    matchesSearch(line, filter.search)
  );
}

export type FilterChoices = { crops: BilingualName[]; regions: BilingualName[]; seasons: number[] };

/** What can be chosen among: only what some weigh-up has. */
export function listFilterChoices(lines: readonly WeighUpLine[]): FilterChoices {
  const byName = (names: BilingualName[]) => [...new Map(names.map((name) => [name.en, name])).values()];
  const seasons = lines.flatMap(({ seasonFrom, seasonTo }) =>
    Array.from({ length: seasonTo - seasonFrom + 1 }, (_, i) => seasonFrom + i),
  );
  return {
    crops: byName(lines.map(({ cropName }) => cropName)),
    regions: byName(lines.map(({ regionName }) => regionName)),
    seasons: [...new Set(seasons)].sort((a, b) => b - a),
  };
}
