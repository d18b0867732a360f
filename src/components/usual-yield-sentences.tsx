import { useTranslation } from 'react-i18next';
import { decimalsFor } from '#shared/format-number.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type UsualYieldSentencesProps = { candidate: CandidateResult; unit: string; decimals: number };

/** A slope with a smaller p than this is said to be there. */
const slopeLevel = 0.05;

/** The gap where the grower's fields usually yield; nothing where the trials do not carry it, which a caution says. */
export function UsualYieldSentences({ candidate, unit, decimals }: UsualYieldSentencesProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const { gapAtUsualYield: read, gapLine: line } = candidate;
  if (!read?.isCarried || !line) return null;
  const p = format.pValue(line.slopeP);
  // A slope has no unit of its own: so much more gap for each unit of yield, whichever that is.
  const slope = format.number(line.slope, { decimals: decimalsFor(line.slopeSe, ''), isSigned: true });
  return (
    <>
      <p>
        {t('story.usualYield', {
          yield: format.quantity(read.usualYield, unit, { decimals: 1 }),
          trials: t('trialCount', { count: line.trials }),
          gap: format.gap(read.estimate, unit, decimals),
          ...format.ends(read.interval, unit, decimals),
        })}
      </p>
      <p>
        {line.slopeP < slopeLevel
          ? t('story.slopeReal', { slope, unit: format.unit(unit), p })
          : t('story.slopeOpen', { p })}
      </p>
    </>
  );
}
