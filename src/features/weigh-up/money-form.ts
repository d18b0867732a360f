import { z } from 'zod';
import type { Crop } from '#shared/catalogue.ts';
import {
  moneyAssumptions,
  qualityRule,
  refuseMoneyExcess,
  seedBasis,
  seedCost,
  type MoneyAssumptions,
  type QualityRule,
  type SeedCost,
} from '#shared/money.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import { weighUpInput, type WeighUp, type WeighUpInput } from '#shared/weigh-up.ts';
import { toInput } from './weigh-up-input.ts';

const { priceLow, priceMiddle, priceHigh, haulagePerTonne, dryingPerTonne } = moneyAssumptions.shape;
const { harvestPerTonne, dryingPerPoint, standardMoisturePercent } = moneyAssumptions.shape;
const seedShape = seedCost.shape;

/** A figure that may not have been typed yet; nothing is refused as any text that is no figure. */
const typed = <Schema extends z.ZodType<number, number>>(schema: Schema) =>
  z.number().nullable().pipe(schema);

/** A figure that may be left open: what is not known is not zero. */
const open = <Schema extends z.ZodType<number, number>>(schema: Schema) =>
  z.number().nullable().pipe(schema.nullable());

/** Seed is left open where it is not known; treatment and royalty are then 0 unless given. */
const typedSeed = z.object({
  basis: seedBasis,
  seedPerHectare: seedShape.seedPerHectare,
  treatmentPerHectare: open(seedShape.treatmentPerHectare),
  royaltyPerHectare: open(seedShape.royaltyPerHectare),
  seedPricePerKg: open(seedShape.seedPricePerKg.unwrap()),
  targetPlantsM2: open(seedShape.targetPlantsM2.unwrap()),
  thousandKernelWeightG: open(seedShape.thousandKernelWeightG.unwrap()),
  germinationPercent: open(seedShape.germinationPercent.unwrap()),
  mortalityPercent: open(seedShape.mortalityPercent.unwrap()),
  cleaningPerTonne: open(seedShape.cleaningPerTonne.unwrap()),
  harvestMoisturePercent: open(seedShape.harvestMoisturePercent.unwrap()),
  harvestPerHectare: open(seedShape.harvestPerHectare.unwrap()),
  strawPerHectare: open(seedShape.strawPerHectare.unwrap()),
});
type TypedSeed = z.output<typeof typedSeed>;

/** The panel as it may be filled with numbers that were saved before there were limits. */
export const savedMoneyForm = z
  .object({
    areaHectares: typed(weighUpInput.shape.areaHectares),
    priceLow: typed(priceLow),
    priceMiddle: typed(priceMiddle),
    priceHigh: typed(priceHigh),
    haulagePerTonne: typed(haulagePerTonne),
    dryingPerTonne: typed(dryingPerTonne),
    harvestPerTonne: open(harvestPerTonne.unwrap()),
    dryingPerPoint: open(dryingPerPoint.unwrap()),
    standardMoisturePercent: open(standardMoisturePercent.unwrap()),
    qualityRules: z
      .array(
        qualityRule.extend({
          limit: typed(qualityRule.shape.limit),
          perTonne: typed(qualityRule.shape.perTonne),
        }),
      )
      .max(12),
    currentLevels: z.record(z.string(), open(z.number().min(-10_000).max(10_000))),
    seedCosts: z.record(z.string(), typedSeed),
  })
  .refine((form) => form.priceLow <= form.priceMiddle && form.priceMiddle <= form.priceHigh, {
    path: ['priceMiddle'],
    message: 'price-order',
  })
  .refine((form) => form.priceLow > findWorstCostPerTonne(leaveOutOpen(form)), {
    path: ['priceLow'],
    message: 'price-under-costs',
  });

/** What the money panel holds: prices and costs as typed, by variety id for seed. */
export const moneyForm = savedMoneyForm.superRefine((form, context) =>
  refuseMoneyExcess(
    {
      ...leaveOutOpen(form),
      ...{ priceLow: form.priceLow, priceMiddle: form.priceMiddle, priceHigh: form.priceHigh },
      seedCosts: toSeedCosts(form),
    },
    context,
  ),
);
export type MoneyForm = z.output<typeof moneyForm>;
export type MoneyDraft = z.input<typeof moneyForm>;

const openSeed: TypedSeed = {
  ...{ basis: 'flat', seedPerHectare: null, treatmentPerHectare: null, royaltyPerHectare: null },
  ...{ seedPricePerKg: null, targetPlantsM2: null, thousandKernelWeightG: null, germinationPercent: null },
  ...{ mortalityPercent: null, cleaningPerTonne: null, harvestMoisturePercent: null },
  ...{ harvestPerHectare: null, strawPerHectare: null },
};

/** The traits that a buyer may pay by: whatever is measured besides yield. */
export const listPaidTraits = ({ traits }: Pick<Crop, 'traits'>): Crop['traits'] =>
  traits.filter(({ kind, slug }) => kind === 'numeric' && slug !== 'yield');

/** What stands in the panel for a weigh-up as saved; only the varieties of the question have a line. */
export function toMoneyDraft(
  { assumptions, areaHectares, currentVarietyId, candidateIds }: WeighUp,
  crop: Pick<Crop, 'traits' | 'standardMoisturePercent'>,
): MoneyDraft {
  const { currentLevels = {}, standardMoisturePercent: moisture } = assumptions;
  return {
    areaHectares,
    priceLow: assumptions.priceLow,
    priceMiddle: assumptions.priceMiddle,
    priceHigh: assumptions.priceHigh,
    haulagePerTonne: assumptions.haulagePerTonne,
    dryingPerTonne: assumptions.dryingPerTonne,
    harvestPerTonne: assumptions.harvestPerTonne ?? null,
    dryingPerPoint: assumptions.dryingPerPoint ?? null,
    standardMoisturePercent: moisture ?? crop.standardMoisturePercent,
    qualityRules: assumptions.qualityRules ?? [],
    currentLevels: Object.fromEntries(
      listPaidTraits(crop).map(({ slug }) => [slug, currentLevels[slug] ?? null]),
    ),
    seedCosts: Object.fromEntries(
      [currentVarietyId, ...candidateIds].map((id) => [id, { ...openSeed, ...assumptions.seedCosts[id] }]),
    ),
  };
}

/** Known figures alone: what was left open is left out. */
type Known<Part> = { [Key in keyof Part]?: Exclude<Part[Key], null> };

/** Leaves out what was left open. */
function pickKnown<Part extends object>(part: Part): Known<Part> {
  // The entries kept are those of the part that are not null.
  return Object.fromEntries(Object.entries(part).filter(([, value]) => value !== null)) as Known<Part>;
}

/** The part of a form that is about a tonne. */
type TonneForm = {
  haulagePerTonne: number;
  dryingPerTonne: number;
  harvestPerTonne: number | null;
  dryingPerPoint: number | null;
  standardMoisturePercent: number | null;
  qualityRules: readonly QualityRule[];
  seedCosts: Readonly<Record<string, TypedSeed>>;
};

/** What findWorstCostPerTonne asks of a form. */
function leaveOutOpen(form: TonneForm): Parameters<typeof findWorstCostPerTonne>[0] {
  const { haulagePerTonne: haulage, dryingPerTonne: drying, qualityRules, seedCosts } = form;
  const { harvestPerTonne: harvest, dryingPerPoint: perPoint, standardMoisturePercent: standard } = form;
  return {
    ...{ haulagePerTonne: haulage, dryingPerTonne: drying, qualityRules },
    ...pickKnown({ harvestPerTonne: harvest, dryingPerPoint: perPoint, standardMoisturePercent: standard }),
    seedCosts: Object.fromEntries(
      Object.entries(seedCosts).map(([id, { harvestMoisturePercent }]) => [
        id,
        pickKnown({ harvestMoisturePercent }),
      ]),
    ),
  };
}

/** The cost of a variety's seed as typed; null where nothing at all was. */
function toSeedCost({ basis, ...parts }: TypedSeed): SeedCost | null {
  const { seedPerHectare, treatmentPerHectare, royaltyPerHectare, ...further } = parts;
  if (Object.values(parts).every((part) => part === null)) return null;
  return {
    ...(basis !== 'flat' && { basis }),
    seedPerHectare,
    treatmentPerHectare: treatmentPerHectare ?? 0,
    royaltyPerHectare: royaltyPerHectare ?? 0,
    ...pickKnown(further),
  };
}

/** Of the varieties of the question, those of which something is known. */
function toSeedCosts({
  seedCosts,
}: Pick<z.output<typeof savedMoneyForm>, 'seedCosts'>): Record<string, SeedCost> {
  return Object.fromEntries(
    Object.entries(seedCosts).flatMap(([id, parts]) => {
      const cost = toSeedCost(parts);
      return cost === null ? [] : [[id, cost]];
    }),
  );
}

/** The assumptions that the panel stands for; a variety of which nothing is known gets no line. */
export function toAssumptions(form: MoneyForm, saved: MoneyAssumptions): MoneyAssumptions {
  const others = Object.entries(saved.seedCosts).filter(([id]) => !(id in form.seedCosts));
  const seedCosts = { ...Object.fromEntries(others), ...toSeedCosts(form) };
  const { harvestPerTonne: harvest, dryingPerPoint: perPoint, standardMoisturePercent: standard } = form;
  return {
    currency: saved.currency,
    priceSheetDate: saved.priceSheetDate,
    priceLow: form.priceLow,
    priceMiddle: form.priceMiddle,
    priceHigh: form.priceHigh,
    haulagePerTonne: form.haulagePerTonne,
    dryingPerTonne: form.dryingPerTonne,
    ...pickKnown({ harvestPerTonne: harvest, dryingPerPoint: perPoint, standardMoisturePercent: standard }),
    ...(form.qualityRules.length > 0 && { qualityRules: form.qualityRules }),
    ...leaveOutEmpty(form.currentLevels),
    seedCosts,
  };
}

function leaveOutEmpty(levels: MoneyForm['currentLevels']): Pick<MoneyAssumptions, 'currentLevels'> {
  const known = pickKnown(levels);
  return Object.keys(known).length > 0 ? { currentLevels: known as Record<string, number> } : {};
}

/** The whole weigh-up with the panel's numbers, as it is saved. */
export function toChangedInput(weighUp: WeighUp, form: MoneyForm): WeighUpInput {
  return {
    ...toInput(weighUp),
    areaHectares: form.areaHectares,
    assumptions: toAssumptions(form, weighUp.assumptions),
  };
}
