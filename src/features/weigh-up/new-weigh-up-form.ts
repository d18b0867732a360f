import { z } from 'zod';
import { mostPriceRatio } from '#shared/money-limits.ts';
import { moneyAssumptions, type MoneyAssumptions } from '#shared/money.ts';
import { weighUpInput, type WeighUpInput } from '#shared/weigh-up.ts';
import type { QuestionDraft } from './question-draft.ts';
import type { CandidateQuestion } from './weigh-up-queries.ts';

/** Currency where no price sheet names one. */
export const fallbackCurrency = 'CAD';

const { growerName, farmName, areaHectares, usualYield } = weighUpInput.shape;
const { priceLow, priceMiddle, priceHigh } = moneyAssumptions.shape;

/** A figure that may not have been typed yet: asked for in words of its own, apart from one that does not fit. */
const typed = <Schema extends z.ZodType<number, number>>(schema: Schema) =>
  z
    .number()
    .nullable()
    .refine((value) => value !== null, { message: 'required', abort: true })
    .pipe(schema);

/** What is typed on the page of a new weigh-up; the question itself stands in the address. */
export const newWeighUpForm = z
  .object({
    growerName,
    farmName,
    areaHectares: typed(areaHectares),
    usualYield: usualYield.unwrap(),
    priceLow: typed(priceLow),
    priceMiddle: typed(priceMiddle),
    priceHigh: typed(priceHigh),
  })
  .refine((form) => form.priceLow <= form.priceMiddle && form.priceMiddle <= form.priceHigh, {
    path: ['priceMiddle'],
    message: 'price-order',
  })
  .refine((form) => form.priceHigh <= mostPriceRatio * form.priceLow, {
    path: ['priceHigh'],
    message: 'price-spread',
  });
export type NewWeighUpForm = z.infer<typeof newWeighUpForm>;

/** While typing, a figure may be missing. */
export type NewWeighUpDraft = z.input<typeof newWeighUpForm>;

/** Joins what was typed with the question and the price sheet's seed costs. */
export function toWeighUpInput(
  form: NewWeighUpForm,
  question: CandidateQuestion,
  { kind, candidateIds }: Pick<QuestionDraft, 'kind' | 'candidateIds'>,
  defaults: MoneyAssumptions | null,
): WeighUpInput {
  const { priceLow: low, priceMiddle: middle, priceHigh: high } = form;
  return {
    ...question,
    question: kind,
    candidateIds: [...candidateIds],
    growerName: form.growerName,
    farmName: form.farmName,
    areaHectares: form.areaHectares,
    usualYield: form.usualYield,
    assumptions: {
      ...defaults,
      currency: defaults?.currency ?? fallbackCurrency,
      priceLow: low,
      priceMiddle: middle,
      priceHigh: high,
      haulagePerTonne: defaults?.haulagePerTonne ?? 0,
      dryingPerTonne: defaults?.dryingPerTonne ?? 0,
      seedCosts: defaults?.seedCosts ?? {},
      priceSheetDate: defaults?.priceSheetDate ?? null,
    },
  };
}
