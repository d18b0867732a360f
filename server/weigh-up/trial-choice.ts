import type { TrialChoice } from '#shared/farm.ts';
import { distanceKm, readFarm, type AskedFarm, type Point } from './farm-place.ts';

/** Which trials a question is asked of. */
export type EvidenceScope = AskedFarm & {
  cropId: string;
  regionId: string;
  seasonFrom: number;
  seasonTo: number;
  trialChoice?: TrialChoice | undefined;
  includeNeighbours?: boolean | undefined;
};

/** Sites beyond this are no neighbours of a farm, however few lie nearer. */
const farthestKm = 250;
const mostNearestSites = 6;
/** A region with a trial site this near is a neighbour. */
const neighbourKm = 100;

/** Whether the advisor has asked for trials beyond the region: without that they never answer for it. */
export const asksForOtherRegions = ({ trialChoice, includeNeighbours }: EvidenceScope): boolean =>
  trialChoice === 'nearest' || includeNeighbours === true;

/** A site or town with the region it belongs to. */
export type RegionPoint = Point & { regionId: string };

export type Geography = { sites: readonly RegionPoint[]; towns: readonly RegionPoint[] };

/**
 * Regions with a trial site within 100 km of one of the region's sites, of one of its towns, or of the farm.
 * A region of which neither is known, asked about without a farm, has no neighbours.
 */
export function findNeighbours(scope: EvidenceScope, { sites, towns }: Geography): ReadonlySet<string> {
  const farm = readFarm(scope);
  const own: Point[] = [...sites, ...towns].filter(({ regionId }) => regionId === scope.regionId);
  if (farm !== null) own.push(farm);
  const near = sites.filter((site) => own.some((point) => distanceKm(point, site) <= neighbourKm));
  return new Set(near.map(({ regionId }) => regionId).filter((regionId) => regionId !== scope.regionId));
}

type PlacedTrial = { siteId: string; regionId: string; place: Point };

/** The trials that a question rests on, of all that the crop has in its seasons; their order is kept. */
export function chooseTrials<Trial extends PlacedTrial>(
  found: readonly Trial[],
  scope: EvidenceScope,
  geography: Geography,
): Trial[] {
  if (scope.trialChoice === 'nearest') return chooseNearest(found, scope);
  const neighbours = scope.includeNeighbours === true ? findNeighbours(scope, geography) : new Set<string>();
  return found.filter(({ regionId }) => regionId === scope.regionId || neighbours.has(regionId));
}

/** Trials of the (at most six) sites nearest the farm among those that have any, none farther than 250 km. */
function chooseNearest<Trial extends PlacedTrial>(found: readonly Trial[], scope: EvidenceScope): Trial[] {
  const farm = readFarm(scope);
  if (farm === null) return [];
  const distances = new Map(found.map(({ siteId, place }) => [siteId, distanceKm(farm, place)]));
  const nearest = [...distances]
    .filter(([, km]) => km <= farthestKm)
    .sort(([, a], [, b]) => a - b)
    .slice(0, mostNearestSites);
  const chosen = new Set(nearest.map(([siteId]) => siteId));
  return found.filter(({ siteId }) => chosen.has(siteId));
}
