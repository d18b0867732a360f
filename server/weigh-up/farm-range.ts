import { makeCaution, type Caution } from '#shared/caution.ts';
import { soilTextures, type FarmRange } from '#shared/farm.ts';
import { distanceKm, type FarmPlace, type SitePlace } from './farm-place.ts';

export type NamedSite = SitePlace & { name: string };

/** Weather and ground change over such a distance even where the normals agree. Common practice. */
const farKm = 100;
/** A farm this little outside the sites' range is as good as inside: normals are no surer. Common practice. */
const rainLeewayMm = 25;
const heatLeewayDegreeDays = 75;
/** The least that counts as a usual difference between sites, where the sites at hand are all alike. Common practice. */
const leastSpread = { rain: 40, heat: 100, soil: 1 };
/** Sites most like the farm that its standardised distance is the mean of. */
const nearestCount = 3;
/** A smaller share of similar sites than this is worth a caution. */
const fewSimilar = 0.25;

/** Position of a texture from light to heavy; null for one that is not on the list. */
function soilStep(texture: string): number | null {
  const at = soilTextures.findIndex((one) => one === texture);
  return at < 0 ? null : at;
}

/** Standard deviation over the sites, never under the least that counts. */
function spreadOf(values: readonly number[], least: number): number {
  if (values.length < 2) return least;
  const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
  const squares = values.reduce((sum, x) => sum + (x - mean) ** 2, 0);
  return Math.max(least, Math.sqrt(squares / (values.length - 1)));
}

/** By site, the root mean square of its differences to the farm in standard deviations; null where nothing is known. */
function standardise(farm: FarmPlace, sites: readonly NamedSite[]): number[] | null {
  const soilOfFarm = farm.soilTexture === null ? null : soilStep(farm.soilTexture);
  const measures = [
    { of: farm.seasonRainMm, at: sites.map((site) => site.seasonRainMm), least: leastSpread.rain },
    { of: farm.heatSumDegreeDays, at: sites.map((site) => site.heatSumDegreeDays), least: leastSpread.heat },
    {
      of: soilOfFarm,
      // A texture off the list counts as the middle one: it says nothing either way.
      at: sites.map((site) => soilStep(site.soilTexture) ?? (soilTextures.length - 1) / 2),
      least: leastSpread.soil,
    },
  ].flatMap(({ of, at, least }) => (of === null ? [] : [{ of, at, spread: spreadOf(at, least) }]));
  if (measures.length === 0) return null;
  return sites.map((_, i) => {
    const squares = measures.reduce((sum, { of, at, spread }) => sum + ((at[i]! - of) / spread) ** 2, 0);
    return Math.sqrt(squares / measures.length);
  });
}

/**
 * How far the farm lies from the sites of the trials: km to the nearest, and the standardised distance in rain, heat
 * sum and soil. A site is similar at a distance of at most one standard deviation.
 * @returns null without sites
 */
export function measureFarmRange(farm: FarmPlace, sites: readonly NamedSite[]): FarmRange | null {
  const byKm = sites
    .map((site) => ({ name: site.name, km: distanceKm(farm, site) }))
    .sort((a, b) => a.km - b.km);
  const [nearest] = byKm;
  if (nearest === undefined) return null;
  const distances = standardise(farm, sites);
  const closest = distances?.toSorted((a, b) => a - b).slice(0, nearestCount) ?? null;
  return {
    sites: sites.length,
    nearestSite: nearest.name,
    nearestKm: nearest.km,
    standardisedDistance: closest && closest.reduce((sum, d) => sum + d, 0) / closest.length,
    similarSites: distances && distances.filter((distance) => distance <= 1).length,
  };
}

/** What there is to say of a farm outside the range of the trial sites, in place, rain, heat and soil. */
export function cautionFarm(farm: FarmPlace, sites: readonly NamedSite[]): Caution[] {
  const range = measureFarmRange(farm, sites);
  if (range === null) return [];
  const count = range.sites;
  const found: Caution[] = [];
  if (range.nearestKm > farKm)
    found.push(
      makeCaution('farm-far', 'warning', { site: range.nearestSite, distance: range.nearestKm, count }),
    );
  const rain = measureExcess(farm.seasonRainMm, sites, (site) => site.seasonRainMm, rainLeewayMm);
  if (rain < 0) found.push(makeCaution('farm-drier', 'warning', { difference: -rain, count }));
  if (rain > 0) found.push(makeCaution('farm-wetter', 'warning', { difference: rain, count }));
  const heat = measureExcess(
    farm.heatSumDegreeDays,
    sites,
    (site) => site.heatSumDegreeDays,
    heatLeewayDegreeDays,
  );
  if (heat < 0) found.push(makeCaution('farm-cooler', 'warning', { difference: -heat, count }));
  if (heat > 0) found.push(makeCaution('farm-warmer', 'warning', { difference: heat, count }));
  found.push(...cautionSoil(farm, sites));
  const { similarSites: similar, standardisedDistance: distance } = range;
  if (similar !== null && distance !== null && similar < fewSimilar * count)
    found.push(makeCaution('farm-unlike-sites', 'warning', { similar, count, distance }));
  return found;
}

/** How far the farm's value lies over the highest site (positive) or under the lowest (negative); 0 within the leeway. */
function measureExcess(
  value: number | null,
  sites: readonly NamedSite[],
  read: (site: NamedSite) => number,
  leeway: number,
): number {
  if (value === null) return 0;
  const values = sites.map(read);
  const under = value - Math.min(...values);
  const over = value - Math.max(...values);
  if (under < -leeway) return under;
  return over > leeway ? over : 0;
}

/** A soil with no site within one step of it has not been tried. */
function cautionSoil(farm: FarmPlace, sites: readonly NamedSite[]): Caution[] {
  const own = farm.soilTexture === null ? null : soilStep(farm.soilTexture);
  const steps = sites.flatMap((site) => soilStep(site.soilTexture) ?? []);
  if (own === null || steps.length === 0 || steps.some((step) => Math.abs(step - own) <= 1)) return [];
  const values = { count: sites.length };
  if (steps.every((step) => step > own)) return [makeCaution('farm-lighter-soil', 'warning', values)];
  if (steps.every((step) => step < own)) return [makeCaution('farm-heavier-soil', 'warning', values)];
  return [makeCaution('farm-other-soil', 'warning', values)];
}
