import { z } from 'zod';
import { moneyAssumptions, type MoneyAssumptions } from '#shared/money.ts';
import { weighUpInput, type WeighUp, type WeighUpInput } from '#shared/weigh-up.ts';
import { toInput } from './weigh-up-input.ts';

const { priceLow, priceMiddle, priceHigh, haulagePerTonne, dryingPerTonne } = moneyAssumptions.shape;

/** A figure that may not have been typed yet; nothing is refused as any text that is no figure. */
const typed = <Schema extends z.ZodType<number, number>>(schema: Schema) =>
  z.number().nullable().pipe(schema);

/** Seed is left open where it is not known; treatment and royalty are then 0 unless given. */
const typedSeed = z.object({
  seedPerHectare: z.number().nullable().pipe(haulagePerTonne.nullable()),
  treatmentPerHectare: z.number().nullable().pipe(haulagePerTonne.nullable()),
  royaltyPerHectare: z.number().nullable().pipe(haulagePerTonne.nullable()),
});

/** What the money panel holds: prices and costs as typed, by variety id for seed. */
export const moneyForm = z
  .object({
    areaHectares: typed(weighUpInput.shape.areaHectares),
    priceLow: typed(priceLow),
    priceMiddle: typed(priceMiddle),
    priceHigh: typed(priceHigh),
    haulagePerTonne: typed(haulagePerTonne),
    dryingPerTonne: typed(dryingPerTonne),
    seedCosts: z.record(z.string(), typedSeed),
  })
  .refine((form) => form.priceLow <= form.priceMiddle && form.priceMiddle <= form.priceHigh, {
    path: ['priceMiddle'],
    message: 'price-order',
  })
  .refine((form) => form.priceLow > form.haulagePerTonne + form.dryingPerTonne, {
    path: ['priceLow'],
    message: 'price-under-costs',
  });
export type MoneyForm = z.output<typeof moneyForm>;
export type MoneyDraft = z.input<typeof moneyForm>;

/** What stands in the panel for a weigh-up as saved; only the varieties of the question have a line. */
export function toMoneyDraft({
  assumptions,
  areaHectares,
  currentVarietyId,
  candidateIds,
}: WeighUp): MoneyDraft {
  const unknown = { seedPerHectare: null, treatmentPerHectare: null, royaltyPerHectare: null };
  return {
    areaHectares,
    priceLow: assumptions.priceLow,
    priceMiddle: assumptions.priceMiddle,
    priceHigh: assumptions.priceHigh,
    haulagePerTonne: assumptions.haulagePerTonne,
    dryingPerTonne: assumptions.dryingPerTonne,
    seedCosts: Object.fromEntries(
      [currentVarietyId, ...candidateIds].map((id) => [id, assumptions.seedCosts[id] ?? unknown]),
    ),
  };
}

/** The assumptions that the panel stands for; a variety whose seed cost is open gets no line. */
export function toAssumptions(form: MoneyForm, saved: MoneyAssumptions): MoneyAssumptions {
  const seedCosts = { ...saved.seedCosts };
  for (const [id, { seedPerHectare, treatmentPerHectare, royaltyPerHectare }] of Object.entries(
    form.seedCosts,
  )) {
    if (seedPerHectare === null) delete seedCosts[id];
    else {
      seedCosts[id] = {
        seedPerHectare,
        treatmentPerHectare: treatmentPerHectare ?? 0,
        royaltyPerHectare: royaltyPerHectare ?? 0,
      };
    }
  }
  return {
    ...saved,
    priceLow: form.priceLow,
    priceMiddle: form.priceMiddle,
    priceHigh: form.priceHigh,
    haulagePerTonne: form.haulagePerTonne,
    dryingPerTonne: form.dryingPerTonne,
    seedCosts,
  };
}

/** The whole weigh-up with the panel's numbers, as it is saved. */
export function toChangedInput(weighUp: WeighUp, form: MoneyForm): WeighUpInput {
  return {
    ...toInput(weighUp),
    areaHectares: form.areaHectares,
    assumptions: toAssumptions(form, weighUp.assumptions),
  };
}
