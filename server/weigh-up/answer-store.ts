import { createHash } from 'node:crypto';
import { eq, lt, sql } from 'drizzle-orm';
import { storedAnswers } from '#drizzle/schema/weigh-ups.ts';
import { weighUpResult, type WeighUpResult } from '#shared/weigh-up.ts';
import type { Database } from '#server/db.ts';
import { engineVersion } from '#server/trials/trial-fit.ts';
import type { EvidenceGround } from './evidence.ts';
import type { Question } from './question.ts';

/** Answers that nobody asked for in this time are forgotten. */
const daysKept = 60;

/**
 * The key of an answer: SHA-256 in hex of all that it hangs on. A publication, a withdrawal, a changed margin or name,
 * newer usual variances each give another key, to the questions they touch and to no others.
 * @param codeMark stands for the code that weighs
 */
export function keyAnswer(ground: EvidenceGround, question: Question, codeMark: string): string {
  return createHash('sha256')
    .update(JSON.stringify({ engineVersion, codeMark, ground, question }))
    .digest('hex');
}

/** The answer under a key, or null. That it was used is noted once a day, so that reading stays reading. */
export async function recallAnswer(db: Database, key: string): Promise<WeighUpResult | null> {
  const [row] = await db
    .select({
      answer: storedAnswers.answer,
      isNoted: sql<boolean>`${storedAnswers.lastUsedAt} > now() - interval '1 day'`,
    })
    .from(storedAnswers)
    .where(eq(storedAnswers.key, key));
  if (row === undefined) return null;
  if (!row.isNoted) {
    await db
      .update(storedAnswers)
      .set({ lastUsedAt: sql`now()` })
      .where(eq(storedAnswers.key, key));
  }
  return weighUpResult.parse(row.answer);
}

/** Keeps an answer, and forgets those that nobody has asked for in a long time. */
export async function keepAnswer(db: Database, key: string, answer: WeighUpResult): Promise<void> {
  await db.insert(storedAnswers).values({ key, answer, engineVersion }).onConflictDoNothing();
  await db
    .delete(storedAnswers)
    .where(lt(storedAnswers.lastUsedAt, sql`now() - make_interval(days => ${daysKept})`));
}
