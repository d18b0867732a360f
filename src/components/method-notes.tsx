import { useTranslation } from 'react-i18next';
import type { FarmRange } from '#shared/farm.ts';
import type { VerdictCode } from '#shared/verdict.ts';
import type { CandidateResult, WeighUpResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type MethodNotesProps = { result: WeighUpResult };

/** How the figures were made, in sentences, with what they rest on. */
export function MethodNotes({ result }: MethodNotesProps) {
  const { t } = useTranslation(['method', 'verdicts']);
  const format = useFormat();
  const from = Math.min(...result.seasons);
  const to = Math.max(...result.seasons);
  const spread = (value: number) => format.quantity(value, 't/ha', { decimals: 2 });
  return (
    <div className="flex max-w-prose flex-col gap-2">
      <p>
        {t('method:trials', {
          trials: t('verdicts:trialCount', { count: result.trials.length }),
          sites: t('method:sites', { count: result.sites }),
          seasons: from === to ? t('method:oneSeason', { season: from }) : t('method:seasons', { from, to }),
        })}
      </p>
      {result.farmRange && <FarmSentence range={result.farmRange} />}
      <p>{t(`method:${result.comparison}`)}</p>
      <p>{t('method:twoTargets')}</p>
      {result.components && (
        <p>
          {t('method:components', {
            site: spread(result.components.site),
            season: spread(result.components.season),
            rest: spread(result.components.rest),
          })}{' '}
          {result.usualVariancesFrom &&
            t(`method:from.${result.usualVariancesFrom}`, {
              date: result.usualVariancesAt ? format.date(result.usualVariancesAt) : '',
            })}
        </p>
      )}
      <SensitivityNotes candidates={result.candidates} />
      <p>{t('method:money')}</p>
      <p>{t('method:calibration')}</p>
      <p className="text-sm text-faded">
        {t('method:computed', { at: format.dateTime(result.computedAt), engine: result.engineVersion })}
      </p>
    </div>
  );
}

/** What the verdicts would be, were the usual variances half or twice what they are taken for. */
function SensitivityNotes({ candidates }: { candidates: readonly CandidateResult[] }) {
  const { t } = useTranslation(['method', 'common']);
  const varied = candidates.flatMap(({ varietyName: variety, verdict, sensitivity }) =>
    sensitivity?.half && sensitivity.double ? [{ variety, verdict, ...sensitivity }] : [],
  );
  if (varied.length === 0) return null;
  const changing = varied.filter(({ verdict, half, double }) => half !== verdict || double !== verdict);
  const say = (verdict: VerdictCode | null) => (verdict === null ? '–' : t(`common:verdict.${verdict}`));
  if (changing.length === 0) return <p>{t('method:sensitivity.holds')}</p>;
  return (
    <div>
      <p>{t('method:sensitivity.changes')}</p>
      <ul className="list-disc pl-5">
        {changing.map(({ variety, verdict, half, double }) => (
          <li key={variety}>
            {t('method:sensitivity.line', {
              ...{ variety, verdict: say(verdict), half: say(half), double: say(double) },
            })}
          </li>
        ))}
      </ul>
    </div>
  );
}

/** How far the farm is from where the figures were grown, in km and in kind. */
function FarmSentence({ range }: { range: FarmRange }) {
  const { t } = useTranslation('method');
  const format = useFormat();
  return (
    <p>
      {t('farm', {
        distance: format.quantity(range.nearestKm, 'km', { decimals: 0 }),
        site: range.nearestSite,
      })}
      {range.similarSites !== null &&
        ` ${t('farmAlike', { count: range.similarSites, sites: format.number(range.sites) })}`}
    </p>
  );
}
