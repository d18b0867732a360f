import connectPgSimple from 'connect-pg-simple';
import type { RequestHandler } from 'express';
import session from 'express-session';
import passport from 'passport';
import type pg from 'pg';
import type { Me } from '#shared/account.ts';
import type { Database } from './db.ts';
import type { ServerSettings } from './env.ts';
import { readActiveMe } from './accounts/account-store.ts';

const dayMs = 24 * 60 * 60 * 1000;
export const sessionCookieName = 'gavelrow';

/**
 * Sessions in PostgreSQL and the signed-in person on each request. The account is read afresh every time,
 * so that a suspension or a change of role holds from the next request on.
 */
export function buildSession(db: Database, pool: pg.Pool, settings: ServerSettings): RequestHandler[] {
  const PgStore = connectPgSimple(session);
  const authenticator = new passport.Passport();
  authenticator.serializeUser((me: Me, done) => done(null, me.id));
  authenticator.deserializeUser((id: string, done) => {
    readActiveMe(db, id).then(
      (me) => done(null, me ?? false),
      (error: unknown) => done(error),
    );
  });
  return [
    session({
      store: new PgStore({
        pool,
        tableName: 'sessions',
        pruneSessionInterval: 15 * 60,
        errorLog: () => undefined,
      }),
      name: sessionCookieName,
      secret: settings.sessionSecret,
      resave: false,
      saveUninitialized: false,
      rolling: true,
      cookie: { httpOnly: true, sameSite: 'lax', secure: settings.isBehindHttpsProxy, maxAge: 7 * dayMs },
    }),
    // Its types promise nothing; it is a handler like the others.
    authenticator.session() as RequestHandler,
  ];
}
