import { useCallback } from 'react';
import { useTranslation } from 'react-i18next';
import type { Variety } from '#shared/catalogue.ts';
import type { QuestionKind } from '#shared/question-kind.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useUnitChoice } from '#src/chosen-units.tsx';
import { UnitSwitch } from '#src/components/unit-switch.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { CandidateList } from './candidate-list.tsx';
import { KeptCandidates } from './kept-candidates.tsx';
import { mostCandidates } from './question-draft.ts';

type CandidatePickerProps = {
  candidates: readonly CandidateResult[];
  /** A pair is chosen elsewhere, by name alone. */
  kind: Exclude<QuestionKind, 'pair'>;
  /** In the order in which they will stand. */
  chosenIds: readonly string[];
  currentName: string;
  /** The crop's, for the other names that they are searched by. */
  varieties: readonly Variety[];
};

/** The candidates with their verdicts already there; those that are kept stand beside the list in their order. */
export function CandidatePicker({
  candidates,
  kind,
  chosenIds,
  currentName,
  varieties,
}: CandidatePickerProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const patch = useUrlPatch();
  const chooseUnit = useUnitChoice();
  const order = (ids: readonly string[]) => patch({ candidates: ids.join(',') });
  const kept = chosenIds.flatMap((id) => candidates.find(({ varietyId }) => varietyId === id) ?? []);
  const aliasesOf = useCallback(
    (varietyId: string) => varieties.find(({ id }) => id === varietyId)?.aliases ?? [],
    [varieties],
  );
  const hasRoom = chosenIds.length < mostCandidates;
  const level = candidates.find(({ gap }) => gap)?.gap?.region.level;
  return (
    <div className="grid items-start gap-x-8 gap-y-6 lg:grid-cols-[minmax(0,1fr)_20rem]">
      <div className="flex min-w-0 flex-col gap-3">
        <CandidateList
          candidates={candidates}
          keptIds={chosenIds}
          hasRoom={hasRoom}
          onKeep={(id, isKept) =>
            order(isKept ? [...chosenIds, id] : chosenIds.filter((chosen) => chosen !== id))
          }
          currentName={currentName}
          aliasesOf={aliasesOf}
        />
        <p className="max-w-prose text-sm text-faded">
          {level !== undefined && `${t('new.intervalNote', { level: format.percent(level * 100) })} `}
          {t(`new.listNote.${kind}`)}
        </p>
        <UnitSwitch onChoose={chooseUnit} />
      </div>
      <section aria-labelledby="kept-title" className="flex flex-col gap-2 lg:sticky lg:top-4">
        <h3 id="kept-title">{t('new.kept.title')}</h3>
        <p role="status" className="text-sm text-faded">
          {t('new.chosen', { count: chosenIds.length })}
          {!hasRoom && ` ${t('new.tooMany')}`}
        </p>
        {kept.length > 0 && <KeptCandidates kept={kept} onOrder={order} />}
      </section>
    </div>
  );
}
