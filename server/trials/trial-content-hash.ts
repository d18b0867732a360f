import { createHash } from 'node:crypto';
import type { TrialContent } from '#shared/trial-content.ts';

/**
 * JSON with sorted keys and no white space, so that equal content has equal bytes whatever wrote it.
 * Numbers are the shortest that restore the same double, as JSON.stringify writes them.
 */
export function writeCanonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(writeCanonicalJson).join(',')}]`;
  if (value === null || typeof value !== 'object') return JSON.stringify(value);
  const members = Object.entries(value)
    .filter(([, member]) => member !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([key, member]) => `${JSON.stringify(key)}:${writeCanonicalJson(member)}`);
  return `{${members.join(',')}}`;
}

/** SHA-256 in hex of the canonical JSON: what a version is known by. */
export function hashTrialContent(content: TrialContent): string {
  return createHash('sha256').update(writeCanonicalJson(content), 'utf8').digest('hex');
}
