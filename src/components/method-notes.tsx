import { useTranslation } from 'react-i18next';
import type { FarmRange } from '#shared/farm.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
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
          {result.usualVariancesFrom && t(`method:from.${result.usualVariancesFrom}`)}
        </p>
      )}
      <p>{t('method:money')}</p>
      <p className="text-sm text-faded">
        {t('method:computed', { at: format.dateTime(result.computedAt), engine: result.engineVersion })}
      </p>
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
