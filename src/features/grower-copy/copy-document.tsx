import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { languages } from '#shared/language.ts';
import { verdictId } from '#shared/page-exchange.ts';
import { writeUnitParameter } from '#shared/reader-units.ts';
import { GavelMark } from '#src/components/gavel-mark.tsx';
import { useReaderUnits } from '#src/components/reader-units-context.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import type { CopyPageFiles } from './copy-page-inputs.ts';

type CopyDocumentProps = {
  title: string;
  files: CopyPageFiles;
  /** Whether the page's script has something to do. */
  hasScript: boolean;
  children: ReactNode;
};

/** The whole page: search engines are kept out, the link is told to nobody, and every way works without scripts. */
export function CopyDocument({ title, files, hasScript, children }: CopyDocumentProps) {
  const { t } = useTranslation(['copy', 'common']);
  return (
    <html lang={useLanguage()}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="robots" content="noindex, nofollow" />
        <meta name="referrer" content="no-referrer" />
        <meta name="theme-color" content="#faf6ec" media="(prefers-color-scheme: light)" />
        <meta name="theme-color" content="#1b1d18" media="(prefers-color-scheme: dark)" />
        <title>{t('common:pageTitle', { page: title })}</title>
        <link rel="icon" href={files.icon} type="image/svg+xml" />
        {'text' in files.style ? (
          <style dangerouslySetInnerHTML={{ __html: files.style.text }} />
        ) : (
          <link rel="stylesheet" href={files.style.address} />
        )}
        {/* A page without its answer is not painted: the browser would lay it out twice. */}
        {hasScript && <link rel="expect" href={`#${verdictId}`} {...{ blocking: 'render' }} />}
      </head>
      <body>
        <a
          href="#page"
          className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-10 focus:rounded-md focus:bg-card focus:p-3"
        >
          {t('common:skipToPage')}
        </a>
        <header className="border-b border-rule">
          <div className="mx-auto flex max-w-prose items-center gap-3 px-4 py-1">
            <GavelMark />
            <span className="font-bold">
              Gavelrow <span className="font-normal text-faded">· {t('copy:readOnly')}</span>
            </span>
            <nav aria-label={t('copy:language')} className="ml-auto print:hidden">
              <LanguageLinks />
            </nav>
          </div>
        </header>
        <main
          id="page"
          tabIndex={-1}
          className="mx-auto max-w-prose px-4 pb-16 pt-5 outline-none print:px-0 print:pb-0 print:pt-1"
        >
          {children}
        </main>
        <CopyFetches files={files} hasScript={hasScript} />
      </body>
    </html>
  );
}

/**
 * Fonts and script, after the first paint: the text is read in the system's type face until ours has come, and a phone is
 * busy enough until then.
 */
function CopyFetches({ files, hasScript }: Pick<CopyDocumentProps, 'files' | 'hasScript'>) {
  const { afterPaint, fonts, script } = files;
  const style = <link rel="stylesheet" href={fonts} />;
  if (afterPaint === null)
    return (
      <>
        {style}
        {hasScript && <script type="module" src={script} />}
      </>
    );
  return (
    <>
      <noscript>{style}</noscript>
      <script
        type="module"
        data-styles={fonts}
        data-starts={hasScript ? script : undefined}
        dangerouslySetInnerHTML={{ __html: afterPaint.text }}
      />
    </>
  );
}

/** Each other language in its own name, as a plain link to the same copy. */
function LanguageLinks() {
  const { t } = useTranslation('common');
  const current = useLanguage();
  const { yieldUnit } = useReaderUnits();
  return languages
    .filter((language) => language !== current)
    .map((language) => (
      <a
        key={language}
        href={`?${new URLSearchParams({ lang: language, unit: writeUnitParameter(yieldUnit) }).toString()}`}
        lang={language}
        hrefLang={language}
        data-carries-price=""
        className="tap-target inline-flex items-center px-1"
      >
        {t(`languageName.${language}`)}
      </a>
    ));
}
