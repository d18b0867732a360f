import { and, eq, sql } from 'drizzle-orm';
import { entries, observations, plots, trials } from '#drizzle/schema/trials.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { insertTrialContents, type NewTrial } from '#server/trials/trial-content-insert.ts';
import { publishTrial, withdrawTrial } from '#server/trials/publish-trial.ts';
import type { DemoTrial } from './generate-demo.ts';
import { demoId, pick, type CatalogueIds } from './store-demo-catalogue.ts';

/** Stores the trials and publishes them by the same road as the desk, in the season's winter. */
export async function storeDemoTrials(
  tx: DatabaseOrTransaction,
  demoTrials: readonly DemoTrial[],
  ids: CatalogueIds,
): Promise<void> {
  await insertTrialContents(
    tx,
    demoTrials.map((trial, i) => toNewTrial(trial, i, ids)),
  );
  for (const [i, { planned }] of demoTrials.entries()) {
    if (planned.state === 'draft' || planned.state === 'in-review') continue;
    const trialId = demoTrialId(demoTrials[i]);
    const authors = authorsOf(i, ids);
    const authorId = planned.isSingleAuthor ? authors.creator : authors.publisher;
    const day = 3 + (i % 24);
    const at = (month: number): Date => new Date(Date.UTC(planned.season, month - 1, day, 9, 30));
    if (planned.incident === 'corrected') await publishSwapped(tx, trialId, authorId, at(10), ids);
    const revision = planned.incident === 'corrected' ? 3 : 1;
    const reason =
      planned.incident === 'corrected'
        ? 'Two plots had been entered in each other’s place'
        : 'Checked against the field book';
    await publishTrial(tx, { trialId, authorId, reason, revision, at: at(11) });
    if (planned.incident === 'withdrawn') {
      const withdrawal = { authorId: ids.accounts.agronome, revision: 2, at: at(12) };
      await withdrawTrial(tx, { trialId, reason: 'Seed lots were mixed up before sowing', ...withdrawal });
    }
  }
}

/** The id of a trial of the demo. */
export function demoTrialId(trial: DemoTrial | undefined): string {
  if (trial === undefined) throw new Error('No such trial in the demo');
  const { crop, site, season, name } = trial.planned;
  return demoId(`trial ${crop} ${site} ${season} ${name}`);
}

function toNewTrial(trial: DemoTrial, i: number, ids: CatalogueIds): NewTrial {
  const { planned, content } = trial;
  return {
    id: demoTrialId(trial),
    cropId: pick(ids.crops, planned.crop),
    siteId: pick(ids.sites, planned.site),
    state: planned.state === 'draft' ? 'draft' : 'in-review',
    createdBy: authorsOf(i, ids).creator,
    createdAt: new Date(Date.UTC(planned.season, 8, 12 + (i % 15), 14)),
    content,
    varietyIds: ids.varieties.get(planned.crop) ?? new Map<string, string>(),
    traitIds: ids.traits.get(planned.crop) ?? new Map<string, string>(),
  };
}

/** The two agronomists take turns: one brings in, the other publishes. */
function authorsOf(i: number, ids: CatalogueIds): { creator: string; publisher: string } {
  const { agronomist, agronome } = ids.accounts;
  return i % 2 === 0
    ? { creator: agronomist, publisher: agronome }
    : { creator: agronome, publisher: agronomist };
}

/** Publishes the trial with the yields of its first two plots in each other's place, then sets them right. */
async function publishSwapped(
  tx: DatabaseOrTransaction,
  trialId: string,
  authorId: string,
  at: Date,
  ids: CatalogueIds,
): Promise<void> {
  const yieldId = pick(ids.traits.get('spring-barley') ?? new Map<string, string>(), 'yield');
  const swap = async (): Promise<void> => {
    const pair = await tx
      .select({ plotId: plots.id, value: observations.value })
      .from(observations)
      .innerJoin(plots, eq(plots.id, observations.plotId))
      .innerJoin(entries, eq(entries.id, plots.entryId))
      .where(and(eq(plots.trialId, trialId), eq(observations.traitId, yieldId)))
      .orderBy(plots.plotNumber)
      .limit(2);
    const [first, second] = pair;
    if (first === undefined || second === undefined)
      throw new Error('The corrected trial has no plots to swap');
    await setValue(tx, first.plotId, yieldId, second.value);
    await setValue(tx, second.plotId, yieldId, first.value);
  };
  await swap();
  const reason = 'Checked against the field book';
  await publishTrial(tx, { trialId, authorId, reason, revision: 1, at });
  await swap();
  await tx
    .update(trials)
    .set({ revision: sql`${trials.revision} + 1` })
    .where(eq(trials.id, trialId));
}

async function setValue(
  tx: DatabaseOrTransaction,
  plotId: string,
  traitId: string,
  value: number,
): Promise<void> {
  await tx
    .update(observations)
    .set({ value })
    .where(and(eq(observations.plotId, plotId), eq(observations.traitId, traitId)));
}
