import type { Language, Me } from '#shared/account.ts';
import { isTimeZone } from '#shared/format-date.ts';
import { growerCopySnapshot, type GrowerCopyLine, type GrowerCopySnapshot } from '#shared/grower-copy.ts';
import type { Database } from '#server/db.ts';
import { readBushelWeight } from '#server/catalogue/catalogue-store.ts';
import { answerWeighUp } from '#server/weigh-up/answer-question.ts';
import { readOwnWeighUp } from '#server/weigh-up/weigh-up-store.ts';
import { presentSentences } from './copy-sentences.ts';
import { hashSentences } from './frozen-sentences.ts';
import { insertCopy } from './grower-copy-store.ts';
import { makeLinkSecret } from './link-secret.ts';

export type CopyWish = {
  language: Language;
  validDays: number;
  /** Where the advisor sits (IANA). */
  timeZone?: string | undefined;
  /** Where to send the link, and the public address that it begins with. */
  mail?: { recipient: string; origin: string };
  /** The copy whose place it takes. */
  followsId?: string;
};

/**
 * Freezes a weigh-up as it is now behind a new link.
 * @returns the copy, and the path that holds the link's secret: it is told here and nowhere again
 * @throws CodedError not-found, also for somebody else's weigh-up
 */
export async function makeCopy(
  db: Database,
  advisor: Pick<Me, 'id' | 'name' | 'email' | 'phone'>,
  weighUpId: string,
  { mail, followsId, timeZone, ...wish }: CopyWish,
): Promise<{ copy: GrowerCopyLine; path: string }> {
  const snapshot = await takeSnapshot(db, advisor, weighUpId, timeZone);
  const secret = makeLinkSecret();
  const path = `/copy/${secret}`;
  const copy = await insertCopy(db, {
    ...wish,
    weighUpId,
    secret,
    snapshot,
    createdBy: advisor.id,
    followsId: followsId ?? null,
    mail: mail === undefined ? null : { recipient: mail.recipient, link: `${mail.origin}${path}` },
  });
  return { copy, path };
}

/** Everything the copy will show, as it is now; the parse keeps out what a copy does not declare. */
async function takeSnapshot(
  db: Database,
  advisor: Pick<Me, 'id' | 'name' | 'email' | 'phone'>,
  weighUpId: string,
  timeZone: string | undefined,
): Promise<GrowerCopySnapshot> {
  const weighUp = await readOwnWeighUp(db, advisor.id, weighUpId);
  const { result, traits } = await answerWeighUp(db, weighUp);
  return growerCopySnapshot.parse({
    format: 2,
    sentencesHash: hashSentences(presentSentences),
    bushelWeightLb: await readBushelWeight(db, weighUp.cropId),
    weighUp,
    result,
    traits,
    advisorName: advisor.name,
    advisorEmail: advisor.email,
    advisorPhone: advisor.phone,
    madeAt: new Date().toISOString(),
    ...(timeZone !== undefined && isTimeZone(timeZone) && { timeZone }),
    engineVersion: result.engineVersion,
  });
}
