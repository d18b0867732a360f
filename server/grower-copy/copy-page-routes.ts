import { createHash } from 'node:crypto';
import type { ErrorRequestHandler, Request, RequestHandler, Response, Router } from 'express';
import { CodedError, type ErrorCode } from '#shared/error-codes.ts';
import { languages, type Language } from '#shared/language.ts';
import { readUnitParameter } from '#shared/reader-units.ts';
import type { YieldUnit } from '#shared/units.ts';
import {
  renderCopyPage,
  renderFailedCopyPage,
  takeCopyScriptData,
  type CopyFailure,
  type CopyPageFiles,
} from '#src/features/grower-copy/render-copy-page.ts';
import type { Database } from '#server/db.ts';
import type { ServerSettings } from '#server/env.ts';
import { settleFailure } from '#server/error-handler.ts';
import { presentSentences } from './copy-sentences.ts';
import { openCopy } from './grower-copy-store.ts';
import { copyLinkOf } from './public-origin.ts';

/** The link is the key: it must not reach search engines or, as a referrer, other sites. Nobody in between keeps the page. */
export const keepLinkPrivate: RequestHandler = (_request, response, next) => {
  response.set({
    'X-Robots-Tag': 'noindex, nofollow',
    'Referrer-Policy': 'no-referrer',
    'Cache-Control': 'private, no-cache',
  });
  next();
};

/** The copy behind its link, as a page: 200, or 404 and 410 with a page of their own. */
export function addCopyPage(
  router: Router,
  db: Database,
  settings: ServerSettings,
  files: CopyPageFiles,
): void {
  router.get('/copy/:token', async (request, response) => {
    const { copy, spoken } = await openAsAsked(db, request, isOpening(request));
    const link = copyLinkOf(request, settings);
    sendTagged(request, response.type('html'), renderCopyPage(copy, { ...spoken, files, link }));
  });

  // What the page's script takes the answer over with; the page was counted before.
  router.get('/copy/:token/answer', async (request, response) => {
    const { copy, spoken } = await openAsAsked(db, request, false);
    sendTagged(request, response.type('json'), JSON.stringify(takeCopyScriptData(copy, spoken)));
  });

  // A link that was cut short or run on leads nowhere either, and whoever follows it is told so by the same page.
  router.use('/copy', () => {
    throw new CodedError('link-unknown');
  });

  const showFailure: ErrorRequestHandler = (error: unknown, request, response, next) => {
    if (response.closed) return;
    const failure = settleFailure(nameGarbled(error), request, response);
    if (failure === null) {
      next(error);
      return;
    }
    const language = askedLanguage(request) ?? readerLanguage(request);
    const page = renderFailedCopyPage(nameFailure(failure.code), {
      language,
      sentences: presentSentences[language],
      files,
    });
    response.type('html').send(page);
  };
  router.use('/copy', showFailure);
}

/** A link with signs that no address can hold is as unknown as any other that was mistyped. */
const nameGarbled = (error: unknown): unknown =>
  error instanceof URIError ? new CodedError('link-unknown', { cause: error }) : error;

const linkFailures: readonly CopyFailure[] = ['link-unknown', 'link-expired', 'link-revoked'];

const nameFailure = (code: ErrorCode): CopyFailure =>
  linkFailures.find((failure) => failure === code) ?? 'away';

/** The copy with its sentences, in the language and the unit of yield that the address asks for. */
async function openAsAsked(db: Database, request: Request<{ token: string }>, isCounted: boolean) {
  const { copy, sentences } = await openCopy(db, request.params.token, { isCounted });
  const language = askedLanguage(request) ?? copy.language;
  return {
    copy,
    spoken: { language, sentences: sentences[language], yieldUnit: askedUnit(request) ?? ('t/ha' as const) },
  };
}

/** The tag is one of all that is sent, so it changes with whatever changes a sign of it. */
function sendTagged(request: Request, response: Response, text: string): void {
  response.set('ETag', `"${createHash('sha256').update(text).digest('base64url')}"`);
  if (request.fresh) response.status(304).end();
  else response.send(text);
}

/** A switch of language or unit on the page itself opens nothing anew, and neither does a look at the headers. */
function isOpening(request: Request): boolean {
  const isSwitch = request.get('sec-fetch-site') === 'same-origin' && Object.keys(request.query).length > 0;
  return request.method === 'GET' && !isSwitch;
}

const askedLanguage = (request: Request): Language | undefined =>
  languages.find((language) => language === request.query['lang']);

const askedUnit = ({ query: { unit } }: Request): YieldUnit | null =>
  readUnitParameter(typeof unit === 'string' ? unit : null);

/** Nothing is known of whoever comes by a link that leads nowhere but what the browser says. */
const readerLanguage = (request: Request): Language =>
  languages.find((language) => language === request.acceptsLanguages([...languages])) ?? 'en';
