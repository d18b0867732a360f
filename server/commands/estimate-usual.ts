import { asc } from 'drizzle-orm';
import { crops } from '#drizzle/schema/crops.ts';
import { closeComputing } from '#server/computing/compute.ts';
import { connectDatabase } from '#server/db.ts';
import { NEEDED_FOR_USUAL } from '#server/stats/engine.ts';
import { estimateCropVariances } from '#server/usual-variances/estimate-crop.ts';
import type { TraitOutcome } from '#server/usual-variances/estimate-from-evidence.ts';

const usage = 'npm run estimate:usual [-- CROP …]    crops by slug; all of them without one';

/** `npm run estimate:usual`: estimates and keeps usual variances from the trials in the database of DATABASE_URL. */
async function main(): Promise<number> {
  const url = process.env['DATABASE_URL'];
  const wanted = process.argv.slice(2);
  if (url === undefined || wanted.includes('--help')) {
    console.error(usage);
    return 1;
  }
  const { db, close } = connectDatabase(url, (error) => console.error(error.message));
  try {
    const known = await db.select({ id: crops.id, slug: crops.slug }).from(crops).orderBy(asc(crops.slug));
    const unknown = wanted.filter((slug) => !known.some((crop) => crop.slug === slug));
    if (unknown.length > 0) {
      console.error(
        `No such crop: ${unknown.join(', ')}. There are: ${known.map(({ slug }) => slug).join(', ')}`,
      );
      return 1;
    }
    console.log(['crop', 'trait', 'site', 'season', 'rest', 'site-years', 'seasons', 'entries'].join('\t'));
    for (const crop of known) {
      if (wanted.length > 0 && !wanted.includes(crop.slug)) continue;
      const outcomes = await estimateCropVariances(db, crop.id, null);
      for (const outcome of outcomes) console.log(writeLine(crop.slug, outcome));
    }
    return 0;
  } finally {
    await closeComputing();
    await close();
  }
}

/** Standard deviations in the trait's unit, each with its 95 % interval. */
function writeLine(cropSlug: string, { traitSlug, estimate }: TraitOutcome): string {
  const { environments, seasons, entries } = estimate;
  const counts = [environments, seasons, entries];
  if (estimate.outcome !== 'estimated') {
    const needs = Object.values(NEEDED_FOR_USUAL).join(', ');
    const why = estimate.outcome === 'not-enough' ? `not enough: needs ${needs}` : 'could not be fitted';
    return [cropSlug, traitSlug, why, '', '', ...counts].join('\t');
  }
  const { variances, intervals } = estimate;
  const spreads = (['site', 'year', 'rest'] as const).map((term) => {
    const interval = intervals[term];
    const range = interval === null ? 'least share' : interval.map(writeSd).join(' to ');
    return `${writeSd(variances[term])} (${range})`;
  });
  return [cropSlug, traitSlug, ...spreads, ...counts].join('\t');
}

const writeSd = (variance: number): string => Math.sqrt(variance).toPrecision(3);

process.exitCode = await main();
