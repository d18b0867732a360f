import { createElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import type { ResourceLanguage } from 'i18next';
import { I18nextProvider } from 'react-i18next';
import { StaticRouter } from 'react-router-dom';
import type { Me } from '#shared/account.ts';
import type { Language } from '#shared/language.ts';
import type { ReaderUnits } from '#shared/reader-units.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { openAllSentences } from '#src/open-all-sentences.ts';
import { FirstView } from './first-view.tsx';

// The front door for the server. Without JSX: the compiler takes types over from another project's .ts files alone.

type FirstViewOptions = {
  me: Me;
  weighUp: WeighUp;
  result: WeighUpResult;
  /** Path and query that the page was asked by. */
  address: string;
  language: Language;
  /** By namespace. */
  sentences: ResourceLanguage;
  units: ReaderUnits;
};

/** The top of a weigh-up's page as HTML; null for a page that begins otherwise. */
export function renderFirstView(options: FirstViewOptions): string | null {
  const { me, weighUp, result, address, language, sentences, units } = options;
  const isTable = new URLSearchParams(address.split('?')[1]).get('view') === 'table';
  if (result.answer !== 'weighed' || isTable) return null;
  const view = createElement(FirstView, { me, weighUp, result });
  return renderToStaticMarkup(
    createElement(
      I18nextProvider,
      { i18n: openAllSentences(language, sentences) },
      createElement(
        StaticRouter,
        { location: address },
        createElement(ReaderUnitsProvider, { units, children: view }),
      ),
    ),
  );
}
