import { createHash } from 'node:crypto';
import {
  weighCandidates,
  type EvidenceNetwork,
  type WeighedCandidates,
  type WeighQuestion,
} from '#server/stats/engine.ts';

/** Weighings kept in this process, the longest unused first. */
const kept = new Map<string, WeighedCandidates>();
const mostKept = 100;

/**
 * Weighs, or recalls: a page opened again, a copy made of it, a price saved that leaves the margins as they were ask
 * the same of the same evidence. The key is a hash of all that the engine is given, so nothing recalled can be stale.
 */
export function weighOnce(network: EvidenceNetwork, question: WeighQuestion): WeighedCandidates {
  const key = createHash('sha256')
    .update(JSON.stringify([network, question]))
    .digest('base64');
  const weighed = kept.get(key) ?? weighCandidates(network, question);
  kept.delete(key);
  kept.set(key, weighed);
  for (const oldest of kept.keys()) {
    if (kept.size <= mostKept) break;
    kept.delete(oldest);
  }
  return weighed;
}
