import type { SoilTexture } from '#shared/farm.ts';

export type Point = { latitude: number; longitude: number };

/** A trial site as the farm is held against it. */
export type SitePlace = Point & {
  seasonRainMm: number;
  heatSumDegreeDays: number;
  soilTexture: string;
};

/** Where the farm lies; what nobody has said of its rain, heat and soil is null. */
export type FarmPlace = Point & {
  seasonRainMm: number | null;
  heatSumDegreeDays: number | null;
  soilTexture: SoilTexture | null;
};

/** The farm as a question carries it. */
export type AskedFarm = {
  farmLatitude?: number | null | undefined;
  farmLongitude?: number | null | undefined;
  farmSeasonRainMm?: number | null | undefined;
  farmHeatSumDegreeDays?: number | null | undefined;
  farmSoilTexture?: SoilTexture | null | undefined;
};

/** The farm's place, or null where nobody has said where it lies. */
export function readFarm(asked: AskedFarm): FarmPlace | null {
  const latitude = asked.farmLatitude ?? null;
  const longitude = asked.farmLongitude ?? null;
  if (latitude === null || longitude === null) return null;
  return {
    latitude,
    longitude,
    seasonRainMm: asked.farmSeasonRainMm ?? null,
    heatSumDegreeDays: asked.farmHeatSumDegreeDays ?? null,
    soilTexture: asked.farmSoilTexture ?? null,
  };
}

/** Mean radius of the Earth (IUGG), km. */
const earthRadiusKm = 6371.0088;
const toRadians = (degrees: number): number => (degrees * Math.PI) / 180;

/** Great-circle distance in km, by the haversine formula: exact enough for near points. */
export function distanceKm(a: Point, b: Point): number {
  const north = Math.sin(toRadians(b.latitude - a.latitude) / 2);
  const east = Math.sin(toRadians(b.longitude - a.longitude) / 2);
  const h = north * north + Math.cos(toRadians(a.latitude)) * Math.cos(toRadians(b.latitude)) * east * east;
  return 2 * earthRadiusKm * Math.asin(Math.min(1, Math.sqrt(h)));
}
