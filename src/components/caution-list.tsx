import { useId, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { CautionSeverity } from '#shared/caution.ts';
import { sortByGravity } from '#shared/caution-sentences.ts';

export type CautionItem = { id: string; severity: CautionSeverity; text: ReactNode };

type CautionListProps = {
  title: ReactNode;
  items: readonly CautionItem[];
  /** Level of the title in the page's outline. */
  headingLevel?: 2 | 3;
  /** On paper: how many there are, and that they may go on on the next sheet. */
  mayBreak?: boolean;
};

const tones: Record<CautionSeverity, string> = {
  stop: 'text-stop',
  warning: 'text-break-even',
  note: 'text-faded',
};

/** Where the evidence stops: always in view, gravest first, each with its glyph and its word. */
export function CautionList({ title, items, headingLevel = 2, mayBreak = false }: CautionListProps) {
  const { t } = useTranslation(['common', 'verdicts']);
  const titleId = useId();
  const Heading = `h${headingLevel}` as const;
  const sorted = sortByGravity(items);
  if (sorted.length === 0) return null;
  return (
    <section
      aria-labelledby={titleId}
      className="rounded-lg bg-warning px-4 py-4 sm:px-5 print:border print:border-ink print:p-1.5 print:box-decoration-clone"
    >
      <Heading id={titleId} className="mb-2 print:mb-0.5">
        {title}
      </Heading>
      {mayBreak && (
        <p className="mb-1 hidden text-sm text-faded print:block print:break-after-avoid">
          {t('verdicts:cautionsOnPaper', { count: sorted.length })}
        </p>
      )}
      <ul className="flex flex-col gap-2.5 print:block print:text-sm">
        {sorted.map((item) => (
          <li
            key={item.id}
            className="grid grid-cols-[1.5rem_minmax(0,1fr)] gap-x-2 print:mb-px print:grid-cols-[1.1rem_minmax(0,1fr)]"
          >
            <SeverityGlyph severity={item.severity} />
            <p className="max-w-[46rem] print:max-w-none">
              <strong className={`font-semibold ${tones[item.severity]}`}>
                {t(`common:severity.${item.severity}`)}
              </strong>{' '}
              {item.text}
            </p>
          </li>
        ))}
      </ul>
    </section>
  );
}

/** A line for a note, a triangle for a warning, a barred square for a stop: told apart without colour. */
function SeverityGlyph({ severity }: { severity: CautionSeverity }) {
  return (
    <svg
      viewBox="0 0 20 20"
      className={`mt-0.5 size-5 print:mt-px print:size-3.5 ${tones[severity]}`}
      aria-hidden="true"
    >
      {severity === 'note' && <path d="M3 10h14" stroke="currentColor" strokeWidth="3" />}
      {severity === 'warning' && (
        <>
          <path
            d="M10 2 18.5 17.5h-17Z"
            fill="none"
            stroke="currentColor"
            strokeWidth="2"
            strokeLinejoin="round"
          />
          <path d="M10 7.5v5M10 14.4v1.4" stroke="currentColor" strokeWidth="2" />
        </>
      )}
      {severity === 'stop' && (
        <>
          <rect x="2" y="2" width="16" height="16" rx="2" fill="currentColor" />
          <path d="M5.5 10h9" stroke="var(--color-warning)" strokeWidth="3" />
        </>
      )}
    </svg>
  );
}
