import type { Request } from 'express';
import { readMe } from '#shared/account.ts';
import { readCatalogue } from '#shared/catalogue.ts';
import type { Language } from '#shared/language.ts';
import { unitCookieName, type FirstAnswers } from '#shared/page-exchange.ts';
import { readUnitParameter, storedUnits } from '#shared/reader-units.ts';
import { readWeighUp } from '#shared/weigh-up.ts';
import { renderFirstView } from '#src/features/weigh-up/render-first-view.ts';
import enCautions from '#locales/en/cautions.json' with { type: 'json' };
import enCommon from '#locales/en/common.json' with { type: 'json' };
import enMethod from '#locales/en/method.json' with { type: 'json' };
import enVerdicts from '#locales/en/verdicts.json' with { type: 'json' };
import enWeighUp from '#locales/en/weigh-up.json' with { type: 'json' };
import frCautions from '#locales/fr/cautions.json' with { type: 'json' };
import frCommon from '#locales/fr/common.json' with { type: 'json' };
import frMethod from '#locales/fr/method.json' with { type: 'json' };
import frVerdicts from '#locales/fr/verdicts.json' with { type: 'json' };
import frWeighUp from '#locales/fr/weigh-up.json' with { type: 'json' };
import { readCookie } from './read-cookie.ts';

/** What the top of a weigh-up's page may say. */
const sentences = {
  en: {
    cautions: enCautions,
    common: enCommon,
    method: enMethod,
    verdicts: enVerdicts,
    'weigh-up': enWeighUp,
  },
  fr: {
    cautions: frCautions,
    common: frCommon,
    method: frMethod,
    verdicts: frVerdicts,
    'weigh-up': frWeighUp,
  },
};

/**
 * The top of the page as the client will render it from the same answers, in HTML; empty where there is none: only the
 * page of a weigh-up with a verdict has one.
 */
function writeFirstView(request: Request, answers: FirstAnswers, language: Language): string {
  const weighUpPath = Object.keys(answers).find((path) => /^\/api\/weigh-ups\/[^/]+$/.test(path));
  const answered = readWeighUp.reply.safeParse(answers[weighUpPath ?? '']);
  const session = readMe.reply.safeParse(answers[readMe.path]);
  const catalogue = readCatalogue.reply.safeParse(answers[readCatalogue.path]);
  // Without one of them the client begins by asking for it.
  if (!answered.success || !catalogue.success || !session.data?.me) return '';
  const { weighUp, result } = answered.data;
  const crop = catalogue.data.crops.find(({ id }) => id === weighUp.cropId);
  if (crop === undefined) return '';
  const units = { yieldUnit: readerUnit(request), bushelWeightLb: crop.bushelWeightLb };
  const address = request.originalUrl;
  const { me } = session.data;
  return (
    renderFirstView({ me, weighUp, result, address, language, sentences: sentences[language], units }) ?? ''
  );
}

/** The top of the page, or nothing where that fails: the client renders the page all the same. */
export function tryFirstView(request: Request, answers: FirstAnswers, language: Language): string {
  try {
    return writeFirstView(request, answers, language);
  } catch (error) {
    request.log?.error({ err: error }, 'the top of a page could not be rendered');
    return '';
  }
}

/** The unit that the client will read in: by the address, else as last chosen in this browser. */
function readerUnit(request: Request): (typeof storedUnits)['yieldUnit'] {
  const { unit } = request.query;
  const byAddress = readUnitParameter(typeof unit === 'string' ? unit : null);
  return byAddress ?? readUnitParameter(readCookie(request, unitCookieName)) ?? storedUnits.yieldUnit;
}
