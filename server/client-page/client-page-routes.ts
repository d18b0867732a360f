import type { Express, Request, RequestHandler, Response, Router } from 'express';
import { language as languageCode } from '#shared/account.ts';
import type { Contract } from '#shared/contract.ts';
import { languageCookieName, type FirstAnswers } from '#shared/page-exchange.ts';
import { languages, type Language } from '#shared/language.ts';
import { answerContract } from '#server/route.ts';
import { tryFirstView } from './first-view.ts';
import type { PageDocument } from './page-document.ts';
import { clientPages, everyPageAsks, signInPage, type PageNeeds } from './page-needs.ts';
import { readCookie } from './read-cookie.ts';

/** A page waits no longer than this for its session, and then for its answers, ms: it can ask for them by itself, and say what is the matter. */
const longestWait = 3000;

/**
 * The client's document on every path. Its pages carry what they would ask for first, as the API answers it to the same
 * person: a line of 400 ms is then waited for once instead of three times.
 * @param api holds the contracts
 * @param session finds out who asks
 */
export function addClientPages(
  app: Express,
  document: PageDocument,
  api: Router,
  session: readonly RequestHandler[],
): void {
  const send = async (page: PageNeeds | null, request: Request, response: Response): Promise<void> => {
    const isAsked = await withinWait(openSession(session, request, response).then(() => true));
    const isSignedIn = request.user !== undefined;
    // What was answered to a person is nobody else's, and not theirs any more once they have signed out and go back.
    response
      .set('Cache-Control', isSignedIn ? 'no-store' : 'no-cache')
      .vary('Cookie')
      .vary('Accept-Language');
    const language = readerLanguage(request);
    const begin = document.begin(language);
    response.type('html');
    // A browser makes itself ready for a page as soon as that begins: it need not wait for the answers to do so.
    if (isSignedIn) {
      response.write(begin);
      response.flush();
    }
    // Who asks is not known where the session could not be read, and then nothing is answered.
    const answers = (isAsked && (await withinWait(collectAnswers(api, page, request, response)))) || {};
    const isKnownStranger = !isSignedIn && everyPageAsks.path in answers;
    const opened = isKnownStranger && page !== null ? signInPage : page;
    const rest = document.goOn(opened, language, answers, tryFirstView(request, answers, language));
    if (isSignedIn) response.end(rest);
    else response.send(begin + rest);
  };

  for (const page of clientPages) app.get(page.path, (request, response) => send(page, request, response));
  app.get('/{*path}', (request, response) => send(null, request, response));
}

/** What came in time; undefined where it did not, or where it failed: the client then asks, and meets the failure itself. */
async function withinWait<T>(answer: Promise<T>): Promise<T | undefined> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<undefined>((resolve) => {
    timer = setTimeout(() => resolve(undefined), longestWait);
  });
  try {
    return await Promise.race([answer, tooLate]);
  } catch {
    return undefined;
  } finally {
    clearTimeout(timer);
  }
}

async function openSession(
  session: readonly RequestHandler[],
  request: Request,
  response: Response,
): Promise<void> {
  for (const handler of session) await pass(handler, request, response);
}

async function collectAnswers(
  api: Router,
  page: PageNeeds | null,
  request: Request,
  response: Response,
): Promise<FirstAnswers> {
  const asked = [everyPageAsks, ...(request.user === undefined ? [] : (page?.asks ?? []))];
  const answers = await Promise.all(
    asked.map(async (contract) => {
      const reply = await answerNow(api, contract, request, response);
      return reply === null ? [] : [[fillAddress(contract, request.params), reply] as const];
    }),
  );
  return Object.fromEntries(answers.flat());
}

/** The reply as the API would give it, or null where it refuses, fails or would have to weigh first. */
async function answerNow(
  api: Router,
  contract: Contract,
  request: Request,
  response: Response,
): Promise<unknown> {
  try {
    // Aborted from the start: what is stored is read, and no computation begins that the page would wait for.
    return await answerContract(api, contract, { request, response, signal: AbortSignal.abort() });
  } catch {
    return null;
  }
}

function pass(handler: RequestHandler, request: Request, response: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    void handler(request, response, (error?: unknown) => {
      if (error === undefined || error === null) resolve();
      else
        reject(error instanceof Error ? error : new Error('the session could not be read', { cause: error }));
    });
  });
}

const fillAddress = (contract: Contract, params: Request['params']): string =>
  contract.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(String(params[name])));

/** The language that the client will start in: the account's, else the one chosen in this browser, else the browser's. */
function readerLanguage(request: Request): Language {
  const known = languageCode.safeParse(request.user?.language ?? readCookie(request, languageCookieName));
  if (known.success) return known.data;
  return languages.find((language) => language === request.acceptsLanguages([...languages])) ?? 'en';
}
