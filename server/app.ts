import { join } from 'node:path';
import compression from 'compression';
import { DrizzleQueryError } from 'drizzle-orm/errors';
import express, { type Express, type RequestHandler, Router } from 'express';
import helmet from 'helmet';
import type pg from 'pg';
import type { Logger } from 'pino';
import { pinoHttp } from 'pino-http';
import { CodedError } from '#shared/error-codes.ts';
import { addAccountRoutes } from './accounts/account-routes.ts';
import { addSignInRoutes } from './accounts/sign-in-routes.ts';
import { addAuditRoutes } from './audit/audit-routes.ts';
import { addCatalogueRoutes } from './catalogue/catalogue-routes.ts';
import { addClientPages } from './client-page/client-page-routes.ts';
import { openPageDocument } from './client-page/page-document.ts';
import type { InlineFile } from './built-files.ts';
import type { Database } from './db.ts';
import type { ServerSettings } from './env.ts';
import { handleError } from './error-handler.ts';
import { findCopyPageFiles } from './grower-copy/copy-page-files.ts';
import { addCopyPage, keepLinkPrivate } from './grower-copy/copy-page-routes.ts';
import { addCopyPdf } from './grower-copy/pdf/copy-pdf-routes.ts';
import { addGrowerCopyRoutes } from './grower-copy/grower-copy-routes.ts';
import { addHealthRoute } from './health.ts';
import { requireSameOrigin } from './same-origin.ts';
import { buildSession } from './sign-in-session.ts';
import { addTrialDeskRoutes } from './trial-desk/trial-desk-routes.ts';
import { addTrialRoutes } from './trials/trial-routes.ts';
import { addUsualVariancesRoutes } from './usual-variances/usual-variances-routes.ts';
import { addDraftRoutes } from './weigh-up/draft-routes.ts';
import { addWeighUpRecordRoutes } from './weigh-up/weigh-up-record-routes.ts';
import { addWeighUpRoutes } from './weigh-up/weigh-up-routes.ts';

const capabilities = [
  addSignInRoutes,
  addAccountRoutes,
  addAuditRoutes,
  addCatalogueRoutes,
  addTrialRoutes,
  addTrialDeskRoutes,
  addWeighUpRoutes,
  addWeighUpRecordRoutes,
  addDraftRoutes,
  addUsualVariancesRoutes,
  addGrowerCopyRoutes,
];

/**
 * Builds the application: API under /api, grower copies under /copy, the client on every other path. Listens to nothing yet.
 * @param onMailQueued told when a mail was put into the outbox, so that it need not wait for the next look
 */
export function buildApp(
  db: Database,
  pool: pg.Pool,
  settings: ServerSettings,
  logger: Logger,
  onMailQueued: () => void = () => undefined,
): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', settings.isBehindHttpsProxy ? 1 : false);
  app.use(
    pinoHttp({
      logger,
      redact: ['req.headers.cookie', 'req.headers.authorization', 'res.headers["set-cookie"]'],
      serializers: { err: describeFailure, req: hideLinkSecret },
    }),
  );
  const copyFiles = findCopyPageFiles(settings.clientFolder);
  const document = settings.clientFolder === null ? null : openPageDocument(settings.clientFolder);
  const inPages = {
    styles: [...('hash' in copyFiles.style ? [copyFiles.style] : []), ...(document ? [document.style] : [])],
    scripts: copyFiles.afterPaint ? [copyFiles.afterPaint] : [],
  };
  app.use(buildHelmet(settings, inPages));
  app.use(compression());
  const session = buildSession(db, pool, settings);
  const api = addApi(app, db, session, settings, onMailQueued);
  app.use('/copy', keepLinkPrivate);
  addCopyPdf(app, db, settings);
  addCopyPage(app, db, settings, copyFiles);
  if (settings.clientFolder !== null) serveClient(app, settings.clientFolder);
  if (document !== null) addClientPages(app, document, api, session);
  app.use(handleError);
  return app;
}

/**
 * A failure as the log may hold it. A failed query carries its parameters, which can be a person's address or the hash
 * of a password: its cause says what went wrong without them.
 */
function describeFailure(error: Error): { type: string; message: string; stack: string | undefined } {
  const told = error instanceof DrizzleQueryError && error.cause !== undefined ? error.cause : error;
  return { type: told.name, message: told.message, stack: told.stack };
}

/** A request as the log may hold it: the link of a copy is the key to it. */
function hideLinkSecret<T extends { url: string }>(request: T): T {
  return request.url.startsWith('/copy/') ? { ...request, url: '/copy/…', params: {} } : request;
}

/** Contracts carry whole paths, so the routers are mounted at the root and only the guards at /api. */
function addApi(
  app: Express,
  db: Database,
  session: readonly RequestHandler[],
  settings: ServerSettings,
  onMailQueued: () => void,
): Router {
  app.use('/api', (_request, response, next) => {
    response.set('Cache-Control', 'no-store');
    next();
  });
  app.use('/api', requireSameOrigin, express.json({ limit: '256kb' }));
  const router = Router();
  addHealthRoute(router, db);
  router.use('/api', ...session);
  for (const addRoutes of capabilities) addRoutes(router, db, settings, onMailQueued);
  app.use(router);
  app.use('/api', () => {
    throw new CodedError('not-found');
  });
  return router;
}

function serveClient(app: Express, clientFolder: string): void {
  const hashed = { immutable: true, maxAge: '1y', index: false, fallthrough: true } as const;
  app.use('/assets', express.static(join(clientFolder, 'assets'), hashed), (_request, response) => {
    response.status(404).end();
  });
  app.use(express.static(clientFolder, { index: false, maxAge: '1h' }));
}

/** What stands in pages themselves. */
type InPages = Record<'styles' | 'scripts', readonly InlineFile[]>;

/**
 * Headers: everything from our own origin; the charts set style attributes. Plain http on loopback gets no upgrade.
 * No opener policy and no agent cluster of its own: a browser starts a process for each page that asks for them, which
 * costs a slow phone a third of a second. They guard pages that speak to windows they opened, hold frames or set
 * `document.domain`; no page here does (the one link into a new window is `noreferrer`), and none can be framed.
 */
function buildHelmet(settings: ServerSettings, inPages: InPages): RequestHandler {
  const hashesOf = (files: readonly InlineFile[]) => files.map(({ hash }) => `'${hash}'`);
  return helmet({
    crossOriginOpenerPolicy: false,
    originAgentCluster: false,
    contentSecurityPolicy: {
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'", ...hashesOf(inPages.scripts)],
        styleSrc: ["'self'", ...hashesOf(inPages.styles)],
        styleSrcAttr: ["'unsafe-inline'"],
        imgSrc: ["'self'", 'data:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        objectSrc: ["'none'"],
        frameAncestors: ["'none'"],
        upgradeInsecureRequests: settings.isBehindHttpsProxy ? [] : null,
      },
    },
    strictTransportSecurity: settings.isBehindHttpsProxy,
    referrerPolicy: { policy: 'same-origin' },
  });
}
