import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { frozenSentences } from '#drizzle/schema/weigh-ups.ts';
import type { GrowerCopySnapshot } from '#shared/grower-copy.ts';
import { languages } from '#shared/language.ts';
import type { CopySentences } from '#src/features/grower-copy/render-copy-page.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import { presentSentences, type BilingualSentences } from './copy-sentences.ts';

/** SHA-256 in hex: sentences are kept under it, once for each wording. */
export const hashSentences = (sentences: BilingualSentences): string =>
  createHash('sha256').update(JSON.stringify(sentences)).digest('hex');

/** Keeps sentences for the copies that are made with them. */
export async function keepSentences(tx: DatabaseOrTransaction, sentences: BilingualSentences): Promise<void> {
  await tx
    .insert(frozenSentences)
    .values({ hash: hashSentences(sentences), sentences })
    .onConflictDoNothing();
}

/** Kept sentences by their hash: what stands under one never changes. */
const known = new Map<string, BilingualSentences>();

/**
 * The sentences that a copy is told in: those that it was made with, and today's where it needs one that there was not
 * yet.
 */
export async function readSentencesOf(
  db: Database,
  snapshot: GrowerCopySnapshot,
): Promise<BilingualSentences> {
  if (snapshot.format === 1) return presentSentences;
  const { sentencesHash: hash } = snapshot;
  const kept = known.get(hash) ?? (await readKept(db, hash));
  known.set(hash, kept);
  const [en, fr] = languages.map((language) => layOver(kept[language], presentSentences[language]));
  return { en: en ?? {}, fr: fr ?? {} };
}

async function readKept(db: Database, hash: string): Promise<BilingualSentences> {
  const [row] = await db.select().from(frozenSentences).where(eq(frozenSentences.hash, hash));
  if (row === undefined) throw new Error(`the sentences ${hash} of a copy are not kept`);
  // Written by keepSentences alone, and held to its hash.
  return row.sentences as BilingualSentences;
}

const isTexts = (value: unknown): value is CopySentences => typeof value === 'object' && value !== null;

/** The upper texts, with the lower ones where the upper have none. */
function layOver(upper: CopySentences, lower: CopySentences): CopySentences {
  const keys = new Set([...Object.keys(lower), ...Object.keys(upper)]);
  return Object.fromEntries(
    [...keys].map((key) => {
      const [over, under] = [upper[key], lower[key]];
      return [key, isTexts(over) && isTexts(under) ? layOver(over, under) : (over ?? under ?? '')];
    }),
  );
}
