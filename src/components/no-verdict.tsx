import { useTranslation } from 'react-i18next';
import type { BilingualName } from '#shared/catalogue.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type NoVerdictProps = { crop: BilingualName; region: BilingualName; from: number; to: number };

/** A region without trials gets no verdict: said calmly, with why and what helps. */
export function NoVerdict({ crop, region, from, to }: NoVerdictProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  return (
    <NoVerdictCard
      title={t('noTrials.title')}
      why={t('noTrials.why', { crop: format.name(crop), region: format.name(region), from, to })}
      next={t('noTrials.next')}
    />
  );
}

type UnansweredProps = NoVerdictProps & {
  result: WeighUpResult;
  /** Whether the list of trials left out, with the way back into the figures, stands below. */
  canTakeBack: boolean;
};

/** Why a weigh-up has no answer: the region has no trials, or the advisor ticked off all it has. */
export function Unanswered({ result, canTakeBack, ...question }: UnansweredProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const { crop, region, from, to } = question;
  const count = result.leftOut.filter(
    ({ reason, inRegion }) => reason === 'ticked-off' && inRegion !== false,
  ).length;
  if (count === 0) return <NoVerdict {...question} />;
  const names = { crop: format.name(crop), region: format.name(region), from, to };
  return (
    <NoVerdictCard
      title={t('allTickedOff.title')}
      why={t('allTickedOff.why', { ...names, count })}
      next={canTakeBack ? t('allTickedOff.next') : null}
    />
  );
}

function NoVerdictCard({ title, why, next }: { title: string; why: string; next: string | null }) {
  return (
    <section className="max-w-prose rounded-lg border border-edge bg-card px-5 py-5">
      <h2 className="mb-2">{title}</h2>
      <p>{why}</p>
      {next !== null && <p className="mt-2">{next}</p>}
    </section>
  );
}
