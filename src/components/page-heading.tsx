import { useEffect, useRef, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { useLocation } from 'react-router-dom';
import { BoundWords } from './bound-words.tsx';

type PageHeadingProps = {
  /** The page's name: its h1 and, with the product's, the document's title. */
  title: string;
  /** A line above: where the page belongs. */
  above?: ReactNode;
  /** A line below: what it rests on. */
  below?: ReactNode;
  /** Steps at the end of the line. */
  actions?: ReactNode;
};

/** The head of a page. After a navigation it takes the focus, so that a screen reader starts reading here. */
export function PageHeading({ title, above, below, actions }: PageHeadingProps) {
  const { t } = useTranslation('common');
  const documentTitle = t('pageTitle', { page: title });
  const ref = useRef<HTMLHeadingElement>(null);
  const { pathname, key } = useLocation();
  const isFirstPage = key === 'default';
  useEffect(() => {
    document.title = documentTitle;
  }, [documentTitle]);
  useEffect(() => {
    if (!isFirstPage) ref.current?.focus({ preventScroll: true });
    // Only another page moves the focus: a change of the address's parameters is not one.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [pathname]);
  return (
    <div className="mb-5 flex print:mb-2 flex-wrap items-end justify-between gap-x-6 gap-y-3">
      <div className="min-w-0">
        {above && <p className="text-sm text-faded">{above}</p>}
        <h1 ref={ref} tabIndex={-1}>
          <BoundWords text={title} />
        </h1>
        {below && <p className="mt-0.5 text-sm text-faded">{below}</p>}
      </div>
      {actions && <div className="flex flex-wrap gap-3 print:hidden">{actions}</div>}
    </div>
  );
}
