import type { Request, RequestHandler, Response, Router } from 'express';
import passport from 'passport';
import { Strategy } from 'passport-local';
import { signIn, signOut, type Me } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { Database } from '#server/db.ts';
import { route } from '#server/route.ts';
import { sessionCookieName } from '#server/sign-in-session.ts';
import { findSignInAccount, noteSignIn } from './account-store.ts';
import { checkPassword } from './password.ts';
import { limitSignIns } from './sign-in-limits.ts';

export function addSignInRoutes(router: Router, db: Database): void {
  const authenticator = buildAuthenticator(db);
  router.post(signIn.path, ...limitSignIns());

  route(router, signIn, async ({ body, request, response }) => {
    request.body = body;
    const me = await authenticate(authenticator, request, response);
    await startSession(request, me);
    await noteSignIn(db, me.id);
    return { me };
  });

  route(router, signOut, async ({ request, response }) => {
    await endSession(request);
    response.clearCookie(sessionCookieName);
    return {};
  });
}

function buildAuthenticator(db: Database): passport.Authenticator {
  const authenticator = new passport.Passport();
  authenticator.serializeUser((me: Me, done) => done(null, me.id));
  authenticator.use(
    new Strategy({ usernameField: 'email' }, (email, password, done) => {
      checkCredentials(db, email, password).then(
        (me) => done(null, me ?? false),
        (error: unknown) => done(error),
      );
    }),
  );
  return authenticator;
}

/**
 * The person an address and a password belong to; null when they do not belong together. Only who knows the password
 * is told that an account is suspended.
 * @throws CodedError account-suspended
 */
async function checkCredentials(db: Database, email: string, password: string): Promise<Me | null> {
  const account = await findSignInAccount(db, email);
  const isRight = await checkPassword(account?.passwordHash ?? null, password);
  if (account === null || !isRight) return null;
  if (account.isSuspended) throw new CodedError('account-suspended');
  return account.me;
}

/** @throws CodedError wrong-credentials, account-suspended */
function authenticate(
  authenticator: passport.Authenticator,
  request: Request,
  response: Response,
): Promise<Me> {
  return new Promise((resolve, reject) => {
    const answer = (error: unknown, me?: Express.User | false | null): void => {
      if (error) reject(error);
      else if (me) resolve(me);
      else reject(new CodedError('wrong-credentials'));
    };
    // Its types promise nothing; it is a handler like the others.
    const check = authenticator.authenticate('local', { session: false }, answer) as RequestHandler;
    void check(request, response, reject);
  });
}

/** Under a new session id, so that an id somebody planted beforehand opens nothing. */
function startSession(request: Request, me: Me): Promise<void> {
  return new Promise((resolve, reject) => {
    request.logIn(me, (error: unknown) => (error ? reject(error) : resolve()));
  });
}

function endSession(request: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    request.session.destroy((error: unknown) => (error ? reject(error) : resolve()));
  });
}
