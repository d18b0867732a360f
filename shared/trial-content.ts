import { z } from 'zod';
import { trialDesign, trialKind } from './trial.ts';

/**
 * A trial whole, as it is published: what a version holds and what its SHA-256 is taken of.
 * Ids are those of the catalogue; entries and plots are named by label and number, so that a version reads alone.
 */
export const trialContent = z.object({
  format: z.literal(1),
  cropSlug: z.string(),
  siteSlug: z.string(),
  season: z.number().int(),
  name: z.string(),
  design: trialDesign,
  kind: trialKind,
  alpha: z.number(),
  management: z.record(z.string(), z.union([z.string(), z.number(), z.boolean()])),
  sownOn: z.string().nullable(),
  harvestedOn: z.string().nullable(),
  entries: z.array(z.object({ label: z.string(), varietyName: z.string().nullable(), isCheck: z.boolean() })),
  plots: z.array(
    z.object({
      plotNumber: z.string(),
      entry: z.string(),
      rep: z.string().nullable(),
      block: z.string().nullable(),
      row: z.number().int().nullable(),
      col: z.number().int().nullable(),
      mainLevel: z.string().nullable(),
      factorLevels: z.record(z.string(), z.string()).nullable(),
      excludedReason: z.string().nullable(),
      /** By trait slug. */
      values: z.record(z.string(), z.number()),
    }),
  ),
  summary: z
    .array(
      z.object({
        trait: z.string(),
        means: z.array(z.object({ entry: z.string(), mean: z.number(), replicates: z.number().int() })),
        lsd: z.number().nullable(),
        lsdAlpha: z.number().nullable(),
        cvPercent: z.number().nullable(),
        standardError: z.number().nullable(),
        residualMs: z.number().nullable(),
        errorDf: z.number().nullable(),
      }),
    )
    .default([]),
});
export type TrialContent = z.infer<typeof trialContent>;
