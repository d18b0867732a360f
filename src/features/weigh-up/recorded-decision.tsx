import { useTranslation } from 'react-i18next';
import type { Decision } from '#shared/decision.ts';
import { useFormat } from '#src/components/use-format.ts';
import type { ThenAndNowRow } from './then-and-now.ts';
import { ThenAndNowTable } from './then-and-now-table.tsx';

type RecordedDecisionProps = {
  decision: Decision;
  /** Empty where nothing has moved since. */
  rows: readonly ThenAndNowRow[];
};

/** A decision in sentences, and beside it what has become of the evidence. */
export function RecordedDecision({ decision, rows }: RecordedDecisionProps) {
  const { t } = useTranslation('record');
  const format = useFormat();
  const say = useDecisionWords();
  const { said } = decision;
  return (
    <div className="flex flex-col gap-3">
      <div className="max-w-prose">
        <p className="text-lg font-semibold">{say(decision)}</p>
        <p>{decision.reason}</p>
        <p className="text-sm text-faded">
          {t('decision.recordedBy', { name: decision.recordedBy, date: format.date(decision.decidedAt) })}{' '}
          {t('decision.restedOn', { count: said.trials, from: said.seasonFrom, to: said.seasonTo })}{' '}
          {said.tickedOff > 0 && t('decision.tickedOffThen', { count: said.tickedOff })}
        </p>
      </div>
      {rows.length > 0 && <ThenAndNowTable decision={decision} rows={rows} />}
    </div>
  );
}

/** Says in one line what was chosen, and on how many hectares. */
export function useDecisionWords(): (
  decision: Pick<Decision, 'choice' | 'varietyName' | 'areaHectares'>,
) => string {
  const { t } = useTranslation('record');
  const format = useFormat();
  return ({ choice, varietyName, areaHectares }) => {
    const what =
      choice === 'candidate'
        ? (varietyName ?? '')
        : choice === 'current'
          ? t('decision.stays', { name: varietyName ?? '' })
          : t(`decision.${choice}`);
    return areaHectares === null ? what : t('decision.on', { what, area: format.area(areaHectares) });
  };
}
