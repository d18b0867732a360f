import type { Router } from 'express';
import { changeAccount, changeMe, createAccount, listAccounts, readMe } from '#shared/account.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { changeOwnAccount, insertAccount, listAllAccounts, updateAccount } from './account-store.ts';

export function addAccountRoutes(router: Router, db: Database): void {
  route(router, readMe, async ({ me }) => ({ me }));

  route(router, changeMe, async ({ me, body }) => ({
    me: await changeOwnAccount(db, requireMe(me).id, body),
  }));

  route(router, listAccounts, async () => ({ accounts: await listAllAccounts(db) }));

  route(router, createAccount, async ({ me, body }) => ({
    account: await insertAccount(db, requireMe(me).id, body),
  }));

  route(router, changeAccount, async ({ me, params, body }) => ({
    account: await updateAccount(db, requireMe(me).id, params.accountId, body),
  }));
}
