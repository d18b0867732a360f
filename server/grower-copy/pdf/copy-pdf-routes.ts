import type { Request, Response, Router } from 'express';
import { z } from 'zod';
import { dayIn } from '#shared/format-date.ts';
import { zoneOfCopy } from '#shared/zone-of-copy.ts';
import type { BilingualName } from '#shared/catalogue.ts';
import { languages, type Language } from '#shared/language.ts';
import { readUnitParameter } from '#shared/reader-units.ts';
import { readerUnitsOfCopy } from '#shared/reader-units-of-copy.ts';
import { compute } from '#server/computing/compute.ts';
import type { Database } from '#server/db.ts';
import type { ServerSettings } from '#server/env.ts';
import { openCopy } from '#server/grower-copy/grower-copy-store.ts';
import { copyLinkOf } from '#server/grower-copy/public-origin.ts';
import { leavingSignal } from '#server/route.ts';
import { papers } from './page-flow.ts';

/** How the paper is wanted; whatever is not known is taken as not asked. */
const printQuery = z.object({
  lang: z.enum(languages).optional().catch(undefined),
  paper: z.enum(papers).catch('a4'),
  unit: z.string().nullable().catch(null),
});

/**
 * The copy behind its link as a PDF, in its own language unless another is asked for. It fails as the copy itself does,
 * and is no opening of its own: whoever has the link has the copy. The page asks by `?paper=`, so that it need not hold
 * its own secret.
 */
export function addCopyPdf(router: Router, db: Database, settings: ServerSettings): void {
  const sendPdf = async (request: Request<{ token: string }>, response: Response): Promise<void> => {
    const { token } = request.params;
    const { copy, sentences } = await openCopy(db, token, { isCounted: false });
    const { lang: language = copy.language, paper, unit } = printQuery.parse(request.query);
    const { weighUp, madeAt } = copy.snapshot;
    const bytes = await compute(
      'renderCopyPdf',
      [
        {
          ...copy,
          link: copyLinkOf(request, settings),
          language,
          sentences: sentences[language],
          readerUnits: readerUnitsOfCopy(copy.snapshot, readUnitParameter(unit) ?? 't/ha'),
          paper,
          printedAt: new Date().toISOString(),
        },
      ],
      leavingSignal(response),
    );
    response
      .attachment(nameFile(weighUp.cropName, language, dayIn(madeAt, zoneOfCopy(copy.snapshot))))
      .send(Buffer.from(bytes));
  };

  router.get('/copy/:token/pdf', sendPdf);
  router.get('/copy/:token', async (request, response, next) => {
    if (request.query['paper'] === undefined) next();
    else await sendPdf(request, response);
  });
}

/** A name that every system can store: `gavelrow-orge-de-printemps-2026-12-01.pdf`. */
function nameFile(crop: BilingualName, language: Language, day: string): string {
  const plain = crop[language]
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '');
  return `${['gavelrow', plain, day].filter((part) => part !== '').join('-')}.pdf`;
}
