/** Velmar is invented; its coordinates lie in the open Atlantic, where nobody farms. */
export type DemoRegion = { slug: string; nameEn: string; nameFr: string };

export const velmarRegions: readonly DemoRegion[] = [
  { slug: 'upper-velmar', nameEn: 'Upper Velmar', nameFr: 'Haut-Velmar' },
  { slug: 'lower-velmar', nameEn: 'Lower Velmar', nameFr: 'Bas-Velmar' },
  { slug: 'orlaine-plateau', nameEn: 'Orlaine Plateau', nameFr: 'Plateau d’Orlaine' },
  { slug: 'sarrow-coast', nameEn: 'Sarrow Coast', nameFr: 'Côte de Sarrow' },
];

export type DemoSite = {
  slug: string;
  name: string;
  region: string;
  latitude: number;
  longitude: number;
  elevationM: number;
  seasonRainMm: number;
  heatSumDegreeDays: number;
  soilTexture: 'sand' | 'sandy-loam' | 'loam' | 'silt-loam' | 'clay-loam' | 'clay';
  soilPh: number;
};

export const velmarSites: readonly DemoSite[] = [
  {
    slug: 'haverlin',
    name: 'Haverlin',
    region: 'upper-velmar',
    latitude: 47.62,
    longitude: -38.91,
    elevationM: 512,
    seasonRainMm: 318,
    heatSumDegreeDays: 1390,
    soilTexture: 'loam',
    soilPh: 6.3,
  },
  {
    slug: 'corbeval',
    name: 'Corbeval',
    region: 'upper-velmar',
    latitude: 47.81,
    longitude: -38.42,
    elevationM: 588,
    seasonRainMm: 336,
    heatSumDegreeDays: 1325,
    soilTexture: 'sandy-loam',
    soilPh: 6.0,
  },
  {
    slug: 'tessick-hill',
    name: 'Tessick Hill',
    region: 'upper-velmar',
    latitude: 47.44,
    longitude: -38.17,
    elevationM: 467,
    seasonRainMm: 305,
    heatSumDegreeDays: 1435,
    soilTexture: 'clay-loam',
    soilPh: 6.6,
  },
  {
    slug: 'saint-orme',
    name: 'Saint-Orme',
    region: 'lower-velmar',
    latitude: 46.58,
    longitude: -38.64,
    elevationM: 94,
    seasonRainMm: 352,
    heatSumDegreeDays: 1720,
    soilTexture: 'clay',
    soilPh: 7.1,
  },
  {
    slug: 'marrowfen',
    name: 'Marrowfen',
    region: 'lower-velmar',
    latitude: 46.41,
    longitude: -38.2,
    elevationM: 61,
    seasonRainMm: 374,
    heatSumDegreeDays: 1765,
    soilTexture: 'clay',
    soilPh: 7.3,
  },
  {
    slug: 'dastelle',
    name: 'Dastelle',
    region: 'lower-velmar',
    latitude: 46.73,
    longitude: -38.05,
    elevationM: 132,
    seasonRainMm: 341,
    heatSumDegreeDays: 1685,
    soilTexture: 'silt-loam',
    soilPh: 6.9,
  },
  {
    slug: 'brasque',
    name: 'Brasque',
    region: 'orlaine-plateau',
    latitude: 47.12,
    longitude: -39.88,
    elevationM: 731,
    seasonRainMm: 214,
    heatSumDegreeDays: 1560,
    soilTexture: 'sandy-loam',
    soilPh: 7.6,
  },
  {
    slug: 'kessering-flat',
    name: 'Kessering Flat',
    region: 'orlaine-plateau',
    latitude: 46.93,
    longitude: -40.21,
    elevationM: 768,
    seasonRainMm: 198,
    heatSumDegreeDays: 1585,
    soilTexture: 'sand',
    soilPh: 7.8,
  },
  {
    slug: 'orlaine-mesnil',
    name: 'Orlaine-Mesnil',
    region: 'orlaine-plateau',
    latitude: 47.27,
    longitude: -40.05,
    elevationM: 702,
    seasonRainMm: 229,
    heatSumDegreeDays: 1530,
    soilTexture: 'loam',
    soilPh: 7.4,
  },
];
