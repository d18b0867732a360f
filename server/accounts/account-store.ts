import { and, asc, eq, sql } from 'drizzle-orm';
import { sessions, userRegions, users } from '#drizzle/schema/accounts.ts';
import type { Account, AccountChangeInput, Me, NewAccountInput, OwnChangeInput } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import { isUniqueViolation, sqlStateOf, type Database, type DatabaseOrTransaction } from '#server/db.ts';
import { hashPassword } from './password.ts';

const regionIds = sql<
  string[]
>`array(select region_id from user_regions where user_id = users.id order by 1)`;

const personColumns = {
  id: users.id,
  name: users.name,
  email: users.email,
  role: users.role,
  language: users.language,
  regionIds,
};

const meColumns = { ...personColumns, phone: users.phone };

const accountColumns = {
  ...personColumns,
  status: users.status,
  createdAt: users.createdAt,
  lastSignedInAt: users.lastSignedInAt,
};

type AccountRow = Omit<Me, 'phone'> & {
  status: Account['status'];
  createdAt: Date;
  lastSignedInAt: Date | null;
};

const toAccount = (row: AccountRow): Account => ({
  ...row,
  createdAt: row.createdAt.toISOString(),
  lastSignedInAt: row.lastSignedInAt?.toISOString() ?? null,
});

/** The person behind a session; null when the account is gone or suspended. */
export async function readActiveMe(db: Database, id: string): Promise<Me | null> {
  const [row] = await db
    .select(meColumns)
    .from(users)
    .where(and(eq(users.id, id), eq(users.status, 'active')));
  return row ?? null;
}

export type SignInAccount = { me: Me; passwordHash: string; isSuspended: boolean };

/** The account of an address, whatever its case; null when there is none. */
export async function findSignInAccount(db: Database, email: string): Promise<SignInAccount | null> {
  const [row] = await db
    .select({ ...meColumns, passwordHash: users.passwordHash, status: users.status })
    .from(users)
    .where(sql`lower(${users.email}) = lower(${email})`);
  if (row === undefined) return null;
  const { passwordHash, status, ...person } = row;
  return { me: person, passwordHash, isSuspended: status === 'suspended' };
}

export async function noteSignIn(db: Database, id: string): Promise<void> {
  await db
    .update(users)
    .set({ lastSignedInAt: sql`now()` })
    .where(eq(users.id, id));
}

/** @throws CodedError not-signed-in when the account went away in the meantime */
export async function changeOwnAccount(db: Database, id: string, change: OwnChangeInput): Promise<Me> {
  if (Object.keys(change).length > 0) await db.update(users).set(change).where(eq(users.id, id));
  const person = await readActiveMe(db, id);
  if (person === null) throw new CodedError('not-signed-in');
  return person;
}

export async function listAllAccounts(db: Database): Promise<Account[]> {
  const rows = await db
    .select(accountColumns)
    .from(users)
    .orderBy(asc(sql`lower(${users.name})`), asc(users.id));
  return rows.map(toAccount);
}

async function readAccount(db: DatabaseOrTransaction, id: string): Promise<Account> {
  const [row] = await db.select(accountColumns).from(users).where(eq(users.id, id));
  if (row === undefined) throw new CodedError('not-found');
  return toAccount(row);
}

/**
 * @param actorId who creates it; null for the first administrator, whom nobody could
 * @throws CodedError email-taken; invalid-input for a region that does not exist
 */
export async function insertAccount(
  db: Database,
  actorId: string | null,
  input: NewAccountInput,
): Promise<Account> {
  const passwordHash = await hashPassword(input.password);
  return refuseByName(() =>
    db.transaction(async (tx) => {
      const { name, email, role, language } = input;
      const [row] = await tx
        .insert(users)
        .values({ name, email, role, language, passwordHash })
        .returning({ id: users.id });
      if (row === undefined) throw new CodedError('internal');
      await setRegions(tx, row.id, input.regionIds);
      await recordAuditEvent(tx, {
        actorId,
        action: 'account.created',
        subjectKind: 'account',
        subjectId: row.id,
        detail: { name, email, role, regionIds: input.regionIds },
      });
      return readAccount(tx, row.id);
    }),
  );
}

/**
 * Changes role, language, regions or status; a suspended account is signed out everywhere.
 * @throws CodedError not-found, last-administrator, own-account; invalid-input for a region that does not exist
 */
export async function updateAccount(
  db: Database,
  actorId: string,
  id: string,
  change: AccountChangeInput,
): Promise<Account> {
  return refuseByName(() =>
    db.transaction(async (tx) => {
      // Held until the end, so that two administrators cannot take each other's rights at the same moment.
      const administrators = await tx
        .select({ id: users.id })
        .from(users)
        .where(and(eq(users.role, 'administrator'), eq(users.status, 'active')))
        .orderBy(users.id)
        .for('update');
      const before = await readAccount(tx, id);
      guardChange(
        before,
        change,
        actorId,
        administrators.map((row) => row.id),
      );
      const { regionIds: newRegions, ...columns } = change;
      if (Object.keys(columns).length > 0) await tx.update(users).set(columns).where(eq(users.id, id));
      if (newRegions !== undefined) await setRegions(tx, id, newRegions);
      if (change.status === 'suspended') await endSessions(tx, id);
      const after = await readAccount(tx, id);
      const changed = describeChange(before, after);
      if (Object.keys(changed).length === 0) return after;
      await recordAuditEvent(tx, {
        actorId,
        action: nameChange(before, after),
        subjectKind: 'account',
        subjectId: id,
        detail: { name: before.name, ...changed },
      });
      return after;
    }),
  );
}

/** @throws CodedError last-administrator, own-account */
function guardChange(
  before: Account,
  change: AccountChangeInput,
  actorId: string,
  activeAdministrators: string[],
): void {
  const losesRole = change.role !== undefined && change.role !== before.role;
  const isSuspension = change.status === 'suspended' && before.status === 'active';
  if (!losesRole && !isSuspension) return;
  if (activeAdministrators.length === 1 && activeAdministrators[0] === before.id) {
    throw new CodedError('last-administrator');
  }
  if (before.id === actorId) throw new CodedError('own-account');
}

function nameChange(before: Account, after: Account): string {
  if (before.status === after.status) return 'account.changed';
  return after.status === 'suspended' ? 'account.suspended' : 'account.brought-back';
}

/** What was and what is, for the fields that differ. */
function describeChange(before: Account, after: Account): Record<string, unknown> {
  const fields = ['role', 'language', 'status', 'regionIds'] as const;
  const changed = fields.filter((field) => JSON.stringify(before[field]) !== JSON.stringify(after[field]));
  return Object.fromEntries(changed.map((field) => [field, { before: before[field], after: after[field] }]));
}

async function setRegions(tx: DatabaseOrTransaction, userId: string, ids: readonly string[]): Promise<void> {
  await tx.delete(userRegions).where(eq(userRegions.userId, userId));
  const rows = [...new Set(ids)].map((regionId) => ({ userId, regionId }));
  if (rows.length > 0) await tx.insert(userRegions).values(rows);
}

async function endSessions(tx: DatabaseOrTransaction, userId: string): Promise<void> {
  await tx.delete(sessions).where(sql`${sessions.sess} -> 'passport' ->> 'user' = ${userId}`);
}

/** Turns what the database refuses (unique address, foreign key of regions) into the code a person can act on. */
async function refuseByName<T>(write: () => Promise<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if (isUniqueViolation(error)) throw new CodedError('email-taken', { cause: error });
    if (sqlStateOf(error) === '23503') {
      const issues = [{ path: 'regionIds', reason: 'invalid_value' }];
      throw new CodedError('invalid-input', { issues, cause: error });
    }
    throw error;
  }
}
