import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { regions, sites } from '#drizzle/schema/geography.ts';
import type { Database } from '#server/db.ts';

let made = 0;

/** A number that no row of this run has had. */
function next(): number {
  made += 1;
  return made;
}

function only<T>(rows: T[]): T {
  const [row] = rows;
  if (row === undefined) throw new Error('The row was not stored');
  return row;
}

/** A region of its own. */
export async function makeRegion(db: Database, fields: Partial<typeof regions.$inferInsert> = {}) {
  const slug = `region-${next()}`;
  return only(
    await db
      .insert(regions)
      .values({ slug, nameEn: slug, nameFr: slug, ...fields })
      .returning(),
  );
}

/** A site in a region, on a loam with an ordinary season. */
export async function makeSite(
  db: Database,
  regionId: string,
  fields: Partial<typeof sites.$inferInsert> = {},
) {
  const slug = `site-${next()}`;
  return only(
    await db
      .insert(sites)
      .values({
        slug,
        name: slug,
        regionId,
        latitude: 47,
        longitude: -39,
        elevationM: 200,
        seasonRainMm: 300,
        heatSumDegreeDays: 1500,
        soilTexture: 'loam',
        soilPh: 6.5,
        ...fields,
      })
      .returning(),
  );
}

/** A crop with a yield in t/ha; `traits` adds others. */
export async function makeCrop(
  db: Database,
  fields: Partial<typeof crops.$inferInsert> = {},
  otherTraits: Partial<typeof traits.$inferInsert>[] = [],
) {
  const slug = `crop-${next()}`;
  const crop = only(
    await db
      .insert(crops)
      .values({
        slug,
        nameEn: slug,
        nameFr: slug,
        eppoCode: 'TRZAX',
        standardMoisturePercent: 14.5,
        bushelWeightLb: 60,
        cvLimitPercent: 15,
        typicalYield: 5,
        ...fields,
      })
      .returning(),
  );
  const yieldOfCrop = await makeTrait(db, crop.id, { slug: 'yield', nameEn: 'Yield', nameFr: 'Rendement' });
  for (const [i, trait] of otherTraits.entries()) await makeTrait(db, crop.id, { position: i + 1, ...trait });
  return { ...crop, yield: yieldOfCrop };
}

export async function makeTrait(
  db: Database,
  cropId: string,
  fields: Partial<typeof traits.$inferInsert> = {},
) {
  const slug = `trait-${next()}`;
  return only(
    await db
      .insert(traits)
      .values({
        cropId,
        slug,
        nameEn: fields.slug ?? slug,
        nameFr: fields.slug ?? slug,
        unit: 't/ha',
        kind: 'numeric',
        direction: 'higher',
        ...fields,
      })
      .returning(),
  );
}

export async function makeVariety(
  db: Database,
  cropId: string,
  fields: Partial<typeof varieties.$inferInsert> = {},
) {
  return only(
    await db
      .insert(varieties)
      .values({ cropId, name: `Variety ${next()}`, ...fields })
      .returning(),
  );
}
