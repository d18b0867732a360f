import { useTranslation } from 'react-i18next';
import { moneyTilts, verdictTilts, type BeamTilt } from '#shared/beam-tilt.ts';
import type { MoneyVerdictCode, VerdictCode } from '#shared/verdict.ts';

const tones: Record<BeamTilt, string> = {
  candidate: 'text-ahead',
  current: 'text-behind',
  level: 'text-level',
  swinging: 'text-open',
  bare: 'text-open',
};

/** Mark colour of a verdict, as a CSS value. */
export const verdictColours: Record<VerdictCode, string> = {
  ahead: 'var(--color-ahead)',
  behind: 'var(--color-behind)',
  level: 'var(--color-level)',
  open: 'var(--color-open)',
  thin: 'var(--color-open)',
};

/** The balance beam of a verdict. It stands beside the verdict's word, so it says nothing by itself. */
export function Beam({ tilt, className = 'w-8' }: { tilt: BeamTilt; className?: string }) {
  return (
    <svg viewBox="0 0 32 22" className={`shrink-0 ${className}`} aria-hidden="true" data-tilt={tilt}>
      <g fill="none" stroke="currentColor" strokeWidth="2.2" strokeLinecap="round">
        <path d="M16 8v11M10.5 20h11" />
        {tilt === 'candidate' && <TiltedBeam />}
        {tilt === 'current' && <TiltedBeam isMirrored />}
        {tilt === 'level' && <LevelBeam />}
        {tilt === 'swinging' && (
          <path d="M4 4.5 28 11.5M4 11.5 28 4.5" strokeWidth="2" strokeDasharray="2.4 3.4" />
        )}
      </g>
      {tilt === 'bare' && <circle cx="16" cy="6" r="2.4" fill="currentColor" />}
    </svg>
  );
}

/** The heavy pan is filled and low, the light one hollow and high. */
function TiltedBeam({ isMirrored = false }: { isMirrored?: boolean }) {
  return (
    <g transform={isMirrored ? 'matrix(-1 0 0 1 32 0)' : undefined}>
      <path d="M6.4 4.2 26 11.2" />
      <circle cx="27" cy="12" r="3.6" fill="currentColor" stroke="none" />
      <circle cx="4.6" cy="3.8" r="2.4" strokeWidth="1.7" />
    </g>
  );
}

function LevelBeam() {
  return (
    <>
      <path d="M6 8h20" />
      <circle cx="4.5" cy="8" r="3.2" fill="currentColor" stroke="none" />
      <circle cx="27.5" cy="8" r="3.2" fill="currentColor" stroke="none" />
    </>
  );
}

/** Beam and word of a verdict on a trait. */
export function VerdictMark({ verdict, className = '' }: { verdict: VerdictCode; className?: string }) {
  const { t } = useTranslation('common');
  const tilt = verdictTilts[verdict];
  return (
    <span className={`inline-flex items-center gap-2 font-semibold ${tones[tilt]} ${className}`}>
      <Beam tilt={tilt} />
      {t(`verdict.${verdict}`)}
    </span>
  );
}

/** Beam and word of a verdict on money. */
export function MoneyVerdictMark({
  verdict,
  className = '',
}: {
  verdict: MoneyVerdictCode;
  className?: string;
}) {
  const { t } = useTranslation('common');
  const tilt = moneyTilts[verdict];
  return (
    <span className={`inline-flex items-center gap-2 font-semibold ${tones[tilt]} ${className}`}>
      <Beam tilt={tilt} />
      {t(`moneyVerdict.${verdict}`)}
    </span>
  );
}
