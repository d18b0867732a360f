import { useEffect, useRef } from 'react';
import { useTranslation } from 'react-i18next';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { moveBy } from './move-by.ts';

type KeptCandidatesProps = {
  /** In their order. */
  kept: readonly CandidateResult[];
  onOrder: (ids: string[]) => void;
};

type Step = 'up' | 'down' | 'away';

const glyphs: Record<Step, string> = { up: '↑', down: '↓', away: '✕' };

/** The candidates that are kept, in the order in which they will stand; moved and taken away by finger or keyboard. */
export function KeptCandidates({ kept, onOrder }: KeptCandidatesProps) {
  const { t } = useTranslation('weigh-up');
  const list = useRef<HTMLOListElement>(null);
  const pressed = useRef<{ id: string; step: Step } | null>(null);
  const ids = kept.map(({ varietyId }) => varietyId);
  // A row that moves takes the focus with it, so that the same key moves it on.
  useEffect(() => {
    if (pressed.current === null) return;
    const { id, step } = pressed.current;
    pressed.current = null;
    list.current?.querySelector<HTMLButtonElement>(`[data-step="${step} ${id}"]`)?.focus();
  });
  const take = (step: Step, id: string) => {
    if (step === 'away') return onOrder(ids.filter((other) => other !== id));
    pressed.current = { id, step };
    onOrder(moveBy(ids, ids.indexOf(id), step === 'up' ? -1 : 1));
  };
  return (
    <ol ref={list} className="border-t-2 border-ink">
      {kept.map(({ varietyId: id, varietyName: name, verdict }, place) => {
        const isEnd = { up: place === 0, down: place === kept.length - 1, away: false };
        return (
          <li key={id} className="flex items-center gap-2 border-b border-rule py-1">
            <span className="w-6 shrink-0 text-right text-faded">{place + 1}.</span>
            <span className="min-w-0 grow">
              <span className="block font-semibold">{name}</span>
              <VerdictMark verdict={verdict} className="text-sm" />
            </span>
            {(['up', 'down', 'away'] as const).map((step) => (
              <button
                key={step}
                type="button"
                data-step={`${step} ${id}`}
                aria-label={t(`new.kept.${step}`, { name })}
                // Not disabled, which would drop the focus of whoever moves a row to an end.
                aria-disabled={isEnd[step] || undefined}
                onClick={() => !isEnd[step] && take(step, id)}
                className="tap-target shrink-0 rounded-md text-lg text-action hover:bg-card aria-disabled:opacity-30"
              >
                {glyphs[step]}
              </button>
            ))}
          </li>
        );
      })}
    </ol>
  );
}
