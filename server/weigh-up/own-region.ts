import type { Me } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';

/**
 * New questions are asked in one's own regions. What was weighed before a region was taken away stays readable:
 * the grower holds a copy of it.
 * @throws CodedError region-not-yours
 */
export function requireOwnRegion(me: Me, regionId: string): void {
  if (!me.regionIds.includes(regionId)) throw new CodedError('region-not-yours');
}
