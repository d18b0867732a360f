import { useEffect } from 'react';
import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import type { Caution } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { TableCandidate } from './table-candidate.tsx';

type TableViewProps = {
  candidates: readonly CandidateResult[];
  currentName: string;
  money: MoneyAssumptions;
  /** Of the whole evidence. */
  cautions: readonly Caution[];
  /** The money reckoned with is not the saved one. */
  hasUnsaved: boolean;
};

/**
 * The answer in large type, for a tablet turned round at a kitchen table: one candidate at a time, turned by finger or
 * arrow key, its cautions in view. On paper all of them stand one after another.
 */
export function TableView({ candidates, currentName, money, cautions, hasUnsaved }: TableViewProps) {
  const { t } = useTranslation(['weigh-up', 'verdicts']);
  const cautionItems = useCautionItems();
  const { place, turn } = useTurning(candidates);
  const shown = candidates[place];
  if (!shown) return null;
  return (
    <div className="flex flex-col gap-6 md:gap-8">
      {candidates.map((candidate) => (
        <article
          key={candidate.varietyId}
          className={`border-t-2 border-ink pt-4 ${candidate === shown ? '' : 'hidden print:block'}`}
        >
          <TableCandidate candidate={candidate} currentName={currentName} money={money} />
        </article>
      ))}
      {hasUnsaved && <p className="text-lg text-faded">{t('weigh-up:table.unsaved')}</p>}
      <TurningBar candidates={candidates} place={place} turn={turn} />
      <div className="md:text-lg">
        <div className="print:hidden">
          <CautionList
            title={t('verdicts:cautionsTitle')}
            items={cautionItems([...cautions, ...shown.cautions])}
          />
        </div>
        <div className="hidden print:block">
          <CautionList
            title={t('verdicts:cautionsTitle')}
            items={cautionItems([...cautions, ...candidates.flatMap((candidate) => candidate.cautions)])}
          />
        </div>
      </div>
      <AllCandidates candidates={candidates} place={place} turn={turn} />
    </div>
  );
}

type Turning = {
  /** Of the candidate in view, from 0. */
  place: number;
  turn: (place: number) => void;
};

/** Which candidate is in view: the one that is open in the address, so that the full page goes on where this one stops. */
function useTurning(candidates: readonly CandidateResult[]): Turning {
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const place = Math.max(
    candidates.findIndex(({ varietyId }) => varietyId === search.get('open')),
    0,
  );
  const turn = (to: number) => {
    const next = candidates[to];
    if (next) patch({ open: next.varietyId });
  };
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      if (event.altKey || event.ctrlKey || event.metaKey || isTyping(event.target)) return;
      const to = event.key === 'ArrowRight' ? place + 1 : event.key === 'ArrowLeft' ? place - 1 : place;
      if (event.key === 'Escape') patch({ view: null });
      else if (to !== place) turn(to);
    };
    window.addEventListener('keydown', press);
    return () => window.removeEventListener('keydown', press);
  });
  return { place, turn };
}

/** Arrow keys inside a field belong to the field. */
function isTyping(target: EventTarget | null): boolean {
  return target instanceof Element && target.closest('input, select, textarea, [contenteditable]') !== null;
}

type BarProps = Turning & { candidates: readonly CandidateResult[] };

/** Two keys as large as a thumb, at the foot of the screen wherever the page is scrolled to; a low screen keeps its room for the lines. */
function TurningBar({ candidates, place, turn }: BarProps) {
  const { t } = useTranslation('weigh-up');
  const key = (to: number, words: 'previous' | 'next') => {
    const target = candidates[to];
    return (
      <button
        type="button"
        aria-label={target ? t(`table.${words}Of`, { name: target.varietyName }) : t(`table.${words}`)}
        // Not disabled, which would drop the focus of whoever has come to the end.
        aria-disabled={target === undefined || undefined}
        onClick={() => turn(to)}
        className="min-h-16 min-w-16 grow rounded-lg border border-action bg-card px-3 text-xl font-bold text-action aria-disabled:opacity-30 sm:grow-0 sm:px-8"
      >
        <span aria-hidden="true">{words === 'previous' ? '←' : '→'}</span>
      </button>
    );
  };
  return (
    <nav
      aria-label={t('table.all')}
      className="flex items-center justify-between gap-4 border-t border-rule bg-paper py-3 [@media(height>=30rem)]:sticky [@media(height>=30rem)]:bottom-0 print:hidden"
    >
      {key(place - 1, 'previous')}
      <p role="status" className="text-center text-lg">
        {t('table.place', { place: place + 1, count: candidates.length })}
        <span className="sr-only"> {candidates[place]?.varietyName}</span>
      </p>
      {key(place + 1, 'next')}
    </nav>
  );
}

/** Every candidate with its verdict, each a way to it. */
function AllCandidates({ candidates, place, turn }: BarProps) {
  const { t } = useTranslation('weigh-up');
  const show = (to: number) => {
    turn(to);
    window.scrollTo(0, 0);
  };
  return (
    <section aria-labelledby="all-candidates" className="print:hidden">
      <h2 id="all-candidates" className="md:text-xl">
        {t('table.all')}
      </h2>
      <ul>
        {candidates.map(({ varietyId, varietyName, verdict }, at) => (
          <li key={varietyId} className="border-b border-rule">
            <button
              type="button"
              aria-current={at === place || undefined}
              onClick={() => show(at)}
              className="flex min-h-16 w-full flex-wrap items-center justify-between gap-x-6 py-2 text-left text-xl hover:underline aria-current:font-bold"
            >
              {varietyName}
              <VerdictMark verdict={verdict} className="text-lg" />
            </button>
          </li>
        ))}
      </ul>
      <p className="mt-3 text-sm text-faded max-md:hidden">{t('table.keys')}</p>
    </section>
  );
}
