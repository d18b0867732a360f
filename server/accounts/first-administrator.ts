import { eq } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { newAccountInput, type Account } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { Database } from '#server/db.ts';
import { insertAccount } from './account-store.ts';

/**
 * Creates the account from which all others are created. Only where there is no administrator yet: afterwards
 * accounts are made in the product, by somebody who is named in the audit log.
 * @throws CodedError state-conflict when there is an administrator; invalid-input, email-taken
 */
export async function createFirstAdministrator(
  db: Database,
  typed: { name: string; email: string; password: string; language: string },
): Promise<Account> {
  const parsed = newAccountInput.safeParse({ ...typed, role: 'administrator', regionIds: [] });
  if (!parsed.success) {
    throw new CodedError('invalid-input', {
      issues: parsed.error.issues.map(({ path, code, message }) => ({
        path: path.join('.'),
        reason: code,
        message,
      })),
    });
  }
  const [existing] = await db
    .select({ id: users.id })
    .from(users)
    .where(eq(users.role, 'administrator'))
    .limit(1);
  if (existing !== undefined) throw new CodedError('state-conflict');
  return insertAccount(db, null, parsed.data);
}
