import { randomUUID } from 'node:crypto';
import { userRegions, users } from '#drizzle/schema/accounts.ts';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { regions, sites } from '#drizzle/schema/geography.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import { hashPassword } from '#server/accounts/password.ts';
import type { Database } from '#server/db.ts';
import { publishTrial } from '#server/trials/publish-trial.ts';
import { insertTrialContents } from '#server/trials/trial-content-insert.ts';
import { seededNormals } from './bench-task.ts';

const SITES = 20;
const SEASONS = [2022, 2023, 2024, 2025];
const VARIETIES = 16;
const BLOCKS = 4;

export const advisorOfRegion = { email: 'advisor@example.org', password: 'only for a bench 1' };

/** What a question about the sown region names. */
export type SownRegion = { cropId: string; regionId: string; varietyIds: string[] };

/** A crop with 80 published trials (20 sites, 4 seasons) of 16 varieties in one region, and its advisor. */
export async function sowRegion(db: Database): Promise<SownRegion> {
  const [cropId, regionId, userId] = [randomUUID(), randomUUID(), randomUUID()];
  const { email, password } = advisorOfRegion;
  await db.insert(regions).values({ id: regionId, slug: 'plain', nameEn: 'Plain', nameFr: 'Plaine' });
  await db.insert(users).values({
    ...{ id: userId, email, name: 'Bench', role: 'advisor', passwordHash: await hashPassword(password) },
  });
  await db.insert(userRegions).values({ userId, regionId });
  await db.insert(crops).values({
    ...{ id: cropId, slug: 'wheat', nameEn: 'Wheat', nameFr: 'Blé', eppoCode: 'XXXXX' },
    ...{ standardMoisturePercent: 14.5, bushelWeightLb: 60, cvLimitPercent: 15, typicalYield: 6 },
  });
  const yieldId = randomUUID();
  await db.insert(traits).values({
    ...{ id: yieldId, cropId, slug: 'yield', nameEn: 'Yield', nameFr: 'Rendement', unit: 't/ha' },
    ...{ kind: 'numeric', direction: 'higher', practicalMargin: 0.15 },
  });
  const varietyRows = Array.from({ length: VARIETIES }, (_, i) => ({
    ...{ id: randomUUID(), cropId, name: `Variety ${i + 1}`, isCheck: i === 0 },
  }));
  await db.insert(varieties).values(varietyRows);
  const siteRows = Array.from({ length: SITES }, (_, i) => ({
    ...{ id: randomUUID(), slug: `site-${i + 1}`, name: `Site ${i + 1}`, regionId },
    ...{ latitude: 50 + i / 50, longitude: -100, elevationM: 300, seasonRainMm: 250 },
    ...{ heatSumDegreeDays: 1500, soilTexture: 'loam', soilPh: 7 },
  }));
  await db.insert(sites).values(siteRows);
  const names = varietyRows.map(({ name }) => name);
  const contents = growTrials(
    siteRows.map(({ slug }) => slug),
    names,
  );
  const newTrials = contents.map((content) => ({
    ...{ id: randomUUID(), cropId, state: 'draft' as const, createdBy: null, content },
    siteId: siteRows.find(({ slug }) => slug === content.siteSlug)?.id ?? '',
    varietyIds: new Map(varietyRows.map(({ name, id }) => [name, id])),
    traitIds: new Map([['yield', yieldId]]),
  }));
  await insertTrialContents(db, newTrials);
  for (const { id } of newTrials)
    await publishTrial(db, { trialId: id, authorId: userId, reason: 'Sown for a bench', revision: 1 });
  return { cropId, regionId, varietyIds: varietyRows.map(({ id }) => id) };
}

/** Complete blocks with a cereal's variances; the same in every run. */
function growTrials(siteSlugs: readonly string[], names: readonly string[]): TrialContent[] {
  const normal = seededNormals(80);
  const effects = new Map<string, number>();
  const effect = (key: string, sd: number): number => {
    const known = effects.get(key) ?? sd * normal();
    effects.set(key, known);
    return known;
  };
  return siteSlugs.flatMap((siteSlug) =>
    SEASONS.map((season): TrialContent => {
      const level = 6 + 0.8 * normal();
      const valueOf = (name: string): number =>
        level +
        effect(name, 0.3) +
        effect(`${name} ${siteSlug}`, 0.12) +
        effect(`${name} ${season}`, 0.12) +
        effect(`${name} ${siteSlug} ${season}`, 0.18);
      return {
        ...{ format: 1, cropSlug: 'wheat', siteSlug, season, name: `${siteSlug} ${season}` },
        ...{ design: 'rcbd', kind: 'plots', alpha: 0.05, management: {}, sownOn: null, harvestedOn: null },
        entries: names.map((label, i) => ({ label, varietyName: label, isCheck: i === 0 })),
        plots: Array.from({ length: BLOCKS }, (_, block) =>
          names.map((entry, i) => ({
            ...{ plotNumber: String((block + 1) * 100 + i + 1), entry },
            ...{ rep: String(block + 1), block: String(block + 1), row: block + 1, col: i + 1 },
            ...{ mainLevel: null, factorLevels: null, excludedReason: null },
            values: { yield: valueOf(entry) + 0.35 * normal() },
          })),
        ).flat(),
        summary: [],
      };
    }),
  );
}
