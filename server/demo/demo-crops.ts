import type { CropSlug } from './demo-settings.ts';

export type DemoTrait = {
  slug: string;
  nameEn: string;
  nameFr: string;
  unit: string;
  kind: 'numeric' | 'ordinal';
  direction: 'higher' | 'lower' | 'neutral';
  practicalMargin: number | null;
  scaleMin: number | null;
  scaleMax: number | null;
  /** How the demo grows it; yield is grown by its own components. */
  grown: { mean: number; variety: number; trial: number; plot: number; decimals: number } | null;
  /** Share of trials in which it was measured. */
  measured: number;
};

/** From and to which season a variety stood in trials; `to` null where it still does. */
export type DemoVariety = { name: string; from: number; to: number | null; isCheck?: true; alias?: string };

export type DemoCrop = {
  slug: CropSlug;
  nameEn: string;
  nameFr: string;
  eppoCode: string;
  standardMoisturePercent: number;
  bushelWeightLb: number;
  cvLimitPercent: number;
  seedingRatePlantsM2: number;
  previousCrop: string;
  traits: readonly DemoTrait[];
  varieties: readonly DemoVariety[];
};

function yieldTrait(practicalMargin: number): DemoTrait {
  return {
    slug: 'yield',
    nameEn: 'Yield',
    nameFr: 'Rendement',
    unit: 't/ha',
    kind: 'numeric',
    direction: 'higher',
    practicalMargin,
    scaleMin: 0,
    scaleMax: null,
    grown: null,
    measured: 1,
  };
}

type Measured = Pick<DemoTrait, 'slug' | 'nameEn' | 'nameFr' | 'unit' | 'direction' | 'practicalMargin'>;

function numericTrait(trait: Measured, measured: number, grown: DemoTrait['grown']): DemoTrait {
  return { ...trait, kind: 'numeric', scaleMin: 0, scaleMax: null, grown, measured };
}

/** A rating from 1 (none) to 9 (all of it). */
function ratedTrait(
  slug: string,
  nameEn: string,
  nameFr: string,
  measured: number,
  mean: number,
  variety: number,
): DemoTrait {
  return {
    slug,
    nameEn,
    nameFr,
    unit: '1–9',
    kind: 'ordinal',
    direction: 'lower',
    practicalMargin: null,
    scaleMin: 1,
    scaleMax: 9,
    grown: { mean, variety, trial: 1, plot: 0.8, decimals: 0 },
    measured,
  };
}

const protein = (mean: number, practicalMargin: number): DemoTrait =>
  numericTrait(
    {
      slug: 'protein',
      nameEn: 'Protein',
      nameFr: 'Protéines',
      unit: '%',
      direction: 'higher',
      practicalMargin,
    },
    0.75,
    { mean, variety: 0.45, trial: 0.6, plot: 0.35, decimals: 1 },
  );
const testWeight = (mean: number): DemoTrait =>
  numericTrait(
    {
      slug: 'test-weight',
      nameEn: 'Test weight',
      nameFr: 'Poids spécifique',
      unit: 'kg/hL',
      direction: 'higher',
      practicalMargin: 1,
    },
    0.6,
    { mean, variety: 0.9, trial: 1.2, plot: 0.8, decimals: 1 },
  );
const kernelWeight = (nameEn: string, mean: number, variety: number): DemoTrait =>
  numericTrait(
    {
      slug: 'thousand-kernel-weight',
      nameEn,
      nameFr: 'Poids de mille grains',
      unit: 'g',
      direction: 'neutral',
      practicalMargin: mean / 30,
    },
    0.5,
    { mean, variety, trial: variety, plot: mean / 40, decimals: 1 },
  );
const height = (mean: number): DemoTrait =>
  numericTrait(
    {
      slug: 'height',
      nameEn: 'Plant height',
      nameFr: 'Hauteur des plantes',
      unit: 'cm',
      direction: 'lower',
      practicalMargin: 5,
    },
    0.7,
    { mean, variety: 4, trial: 6, plot: 2.5, decimals: 0 },
  );
const maturity = (nameEn: string, nameFr: string, mean: number): DemoTrait =>
  numericTrait(
    { slug: 'maturity', nameEn, nameFr, unit: 'd', direction: 'neutral', practicalMargin: 1 },
    0.8,
    { mean, variety: 1.4, trial: 2.5, plot: 0.8, decimals: 0 },
  );

export const demoCrops: readonly DemoCrop[] = [
  {
    slug: 'spring-barley',
    nameEn: 'Spring barley',
    nameFr: 'Orge de printemps',
    eppoCode: 'HORVX',
    standardMoisturePercent: 14.8,
    bushelWeightLb: 48,
    cvLimitPercent: 15,
    seedingRatePlantsM2: 280,
    previousCrop: 'canola',
    traits: [
      yieldTrait(0.15),
      protein(11.9, 0.3),
      testWeight(65.5),
      kernelWeight('Thousand-kernel weight', 46, 2),
      height(76),
      maturity('Days to maturity', 'Jours à maturité', 91),
      ratedTrait('lodging', 'Lodging', 'Verse', 0.6, 3, 1.2),
      ratedTrait('leaf-disease', 'Leaf diseases', 'Maladies foliaires', 0.45, 4, 1.1),
    ],
    varieties: [
      { name: 'Tamberlow', from: 2018, to: null, isCheck: true },
      { name: 'Quillane', from: 2019, to: null, isCheck: true },
      { name: 'Ostermay', from: 2020, to: null },
      { name: 'Fennick Row', from: 2020, to: null, alias: 'Fennickrow' },
      { name: 'Harrowgilt', from: 2021, to: null },
      { name: 'Sallowmere', from: 2021, to: null },
      { name: 'Pennard Lass', from: 2019, to: 2023 },
      { name: 'Wexcombe', from: 2020, to: 2024 },
      { name: 'Dovrelin', from: 2022, to: null },
      { name: 'Marrasby', from: 2022, to: null },
      { name: 'Ilvane', from: 2023, to: null },
      { name: 'Thornaby Dun', from: 2024, to: null },
      { name: 'Keldrun', from: 2025, to: null },
      { name: 'Larkhollow', from: 2026, to: null },
    ],
  },
  {
    slug: 'field-pea',
    nameEn: 'Field pea',
    nameFr: 'Pois sec',
    eppoCode: 'PIBSX',
    standardMoisturePercent: 16,
    bushelWeightLb: 60,
    cvLimitPercent: 18,
    seedingRatePlantsM2: 85,
    previousCrop: 'spring wheat',
    traits: [
      yieldTrait(0.1),
      protein(22.8, 0.4),
      kernelWeight('Thousand-seed weight', 235, 12),
      height(72),
      maturity('Days to maturity', 'Jours à maturité', 94),
      ratedTrait('lodging', 'Lodging', 'Verse', 0.8, 4, 1.3),
    ],
    varieties: [
      { name: 'Brindle', from: 2018, to: null, isCheck: true },
      { name: 'Torrel', from: 2020, to: null },
      { name: 'Tallis', from: 2021, to: null },
      { name: 'Dunmore Wake', from: 2020, to: null },
      { name: 'Saltby', from: 2019, to: 2024 },
      { name: 'Ostermoor', from: 2022, to: null },
      { name: 'Heron Lee', from: 2022, to: null },
      { name: 'Pelham Ridge', from: 2022, to: null },
      { name: 'Sandrel', from: 2023, to: null },
      { name: 'Corvane', from: 2018, to: 2022 },
      { name: 'Merrow', from: 2024, to: null },
      { name: 'Fennaby', from: 2026, to: null },
    ],
  },
  {
    slug: 'winter-wheat',
    nameEn: 'Winter wheat',
    nameFr: 'Blé d’hiver',
    eppoCode: 'TRZAW',
    standardMoisturePercent: 14.5,
    bushelWeightLb: 60,
    cvLimitPercent: 15,
    seedingRatePlantsM2: 320,
    previousCrop: 'field pea',
    traits: [
      yieldTrait(0.2),
      protein(11.8, 0.3),
      testWeight(79),
      kernelWeight('Thousand-kernel weight', 43, 1.8),
      height(88),
      maturity('Days to maturity', 'Jours à maturité', 318),
      ratedTrait('lodging', 'Lodging', 'Verse', 0.5, 2.6, 1),
      ratedTrait('leaf-rust', 'Leaf rust', 'Rouille brune', 0.5, 3.8, 1.4),
    ],
    varieties: [
      { name: 'Aldermoss', from: 2017, to: null, isCheck: true },
      { name: 'Grantholm', from: 2019, to: null, isCheck: true },
      { name: 'Caldrith', from: 2019, to: null },
      { name: 'Mirrowen', from: 2020, to: null },
      { name: 'Stellacre', from: 2020, to: null },
      { name: 'Bexhollow', from: 2021, to: null },
      { name: 'Tarnovel', from: 2021, to: null },
      { name: 'Ruddenfield', from: 2019, to: 2024 },
      { name: 'Oakmarrow', from: 2018, to: 2022 },
      { name: 'Isselton', from: 2022, to: null },
      { name: 'Hartwyn Vale', from: 2022, to: null },
      { name: 'Brackendre', from: 2023, to: null },
      { name: 'Quorndal', from: 2024, to: null },
      { name: 'Lindelow', from: 2026, to: null },
    ],
  },
];
