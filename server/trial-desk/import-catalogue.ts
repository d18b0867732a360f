import { asc, eq } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { sites } from '#drizzle/schema/geography.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import type { ReadableTrait } from './read-row.ts';

export type ImportVariety = { id: string; name: string; isCheck: boolean };
export type ImportTrait = ReadableTrait & {
  id: string;
  unit: string;
  kind: 'numeric' | 'ordinal';
  direction: 'higher' | 'lower' | 'neutral';
};

/** What a file of a crop and site is read against. */
export type ImportCatalogue = {
  crop: {
    id: string;
    slug: string;
    bushelWeightLb: number;
    typicalYield: number;
    cvLimitPercent: number;
  };
  site: { id: string; slug: string; regionId: string };
  traits: readonly ImportTrait[];
  findVariety: (name: string) => ImportVariety | undefined;
};

/** Headers under which yield travels besides its names. */
const usualYieldNames = ['yield', 'yld', 'grain yield', 'rendement', 'rendement en grain', 'rdt'];

/** @throws CodedError invalid-input naming the field when crop, site or trait is unknown */
export async function readImportCatalogue(
  db: DatabaseOrTransaction,
  names: { crop: string; site: string; trait: string },
): Promise<ImportCatalogue> {
  const [crop] = await db.select().from(crops).where(eq(crops.slug, names.crop));
  if (crop === undefined) throw unknownChoice('crop');
  const [site] = await db.select().from(sites).where(eq(sites.slug, names.site));
  if (site === undefined) throw unknownChoice('site');
  const traitRows = await db
    .select()
    .from(traits)
    .where(eq(traits.cropId, crop.id))
    .orderBy(asc(traits.position), asc(traits.slug));
  if (!traitRows.some((trait) => trait.slug === names.trait)) throw unknownChoice('trait');
  const varietyRows = await db.select().from(varieties).where(eq(varieties.cropId, crop.id));
  const byName = new Map(
    varietyRows.flatMap((variety) =>
      [variety.name, ...variety.aliases].map((name) => [plainName(name), variety] as const),
    ),
  );
  return {
    crop,
    site,
    traits: traitRows.map((trait) => ({
      id: trait.id,
      slug: trait.slug,
      unit: trait.unit,
      kind: trait.kind,
      direction: trait.direction,
      names: [trait.slug, trait.nameEn, trait.nameFr, ...(trait.slug === 'yield' ? usualYieldNames : [])],
      min: trait.scaleMin ?? 0,
      max: trait.scaleMax ?? Number.POSITIVE_INFINITY,
    })),
    findVariety: (name) => byName.get(plainName(name)),
  };
}

/** Variety names are compared without case, accents and spaces. */
function plainName(name: string): string {
  return name
    .normalize('NFD')
    .replace(/[\u0300-\u036f\s]/g, '')
    .toLowerCase();
}

function unknownChoice(path: string): CodedError {
  return new CodedError('invalid-input', { issues: [{ path, reason: 'invalid_value' }] });
}
