import {
  findTicks,
  isOnScale,
  placeOnScale,
  tickDecimals,
  type Scale,
  type Tick,
} from '#shared/gap-scale.ts';
import { toReader } from '#shared/reader-units.ts';
import type { Interval } from '#shared/verdict.ts';
import { useReaderUnits } from './reader-units-context.tsx';
import { useFormat } from './use-format.ts';

/** A position on the scale as CSS, kept so far from both edges that a centred label of twice `half` fits. */
function labelLeft(scale: Scale, value: number, half: string): string {
  return `clamp(${half}, ${placeOnScale(scale, value)}%, calc(100% - ${half}))`;
}

const percent = (scale: Scale, value: number) => `${placeOnScale(scale, value)}%`;

/** Every second tick from zero on: the figures that a phone has room for. */
function isEverySecond([first, second]: readonly Tick[], { label }: Tick): boolean {
  if (first === undefined || second === undefined) return true;
  return Math.round(label / (second.label - first.label)) % 2 === 0;
}

type GapAxisProps = {
  /** In t/ha, as all gaps are; the figures stand at round places of the unit that the page is read in. */
  scale: Scale;
  zeroLabel: string;
};

/** The head of a list of gaps: what zero stands for, and the figures of the one scale that all rows share. */
export function GapAxis({ scale, zeroLabel }: GapAxisProps) {
  const format = useFormat();
  const ticks = findTicks(scale, toReader(1, 't/ha', useReaderUnits()));
  const decimals = tickDecimals(ticks);
  return (
    <div className="relative h-12 text-sm text-faded" aria-hidden="true">
      <span
        className="absolute top-0 -translate-x-1/2 whitespace-nowrap font-semibold text-ink"
        style={{ left: labelLeft(scale, 0, `${zeroLabel.length * 0.29}em`) }}
      >
        {zeroLabel}
      </span>
      {ticks.map((tick) => (
        <span
          key={tick.label}
          className={`absolute top-5 -translate-x-1/2 whitespace-nowrap ${isEverySecond(ticks, tick) ? '' : '@max-lg:hidden'}`}
          style={{ left: percent(scale, tick.value) }}
        >
          {format.number(tick.label, { decimals: tick.label === 0 ? 0 : decimals, isSigned: true })}
        </span>
      ))}
      <svg className="absolute bottom-0 h-1.5 w-full overflow-visible">
        {ticks.map(({ label, value }) => (
          <line
            key={label}
            x1={percent(scale, value)}
            x2={percent(scale, value)}
            y1="0"
            y2="6"
            stroke="var(--color-edge)"
          />
        ))}
      </svg>
    </div>
  );
}

type GapTrackProps = {
  scale: Scale;
  /** Colour of the marks, as a CSS value. */
  colour: string;
  estimate: number | null;
  region: Interval | null;
  ownSeason?: Interval | null;
  breakEven?: number | null;
  /** Drawn as a dotted tick: a figure that no interval backs. */
  isThin?: boolean;
  /** The sentence that stands for the picture. */
  sentence: string;
  height?: number;
};

/** The marks of one gap: range of the own season, interval of the region, estimate, zero and break-even. */
export function GapTrack({
  scale,
  colour,
  estimate,
  region,
  ownSeason = null,
  breakEven = null,
  isThin = false,
  sentence,
  height = 40,
}: GapTrackProps) {
  const middle = height / 2;
  return (
    <svg role="img" aria-label={sentence} className="block w-full overflow-visible" style={{ height }}>
      {ownSeason && (
        <rect
          data-mark="own-season"
          {...spanOf(scale, ownSeason)}
          y={middle - 9}
          height="18"
          rx="9"
          fill={colour}
          fillOpacity="0.16"
          stroke={colour}
          strokeOpacity="0.75"
        />
      )}
      {region && (
        <rect data-mark="region" {...spanOf(scale, region)} y={middle - 6} height="12" rx="2" fill={colour} />
      )}
      <EdgedLine x={percent(scale, 0)} colour="var(--color-ink)" width={1.5} />
      {breakEven !== null && isOnScale(scale, breakEven) && (
        <EdgedLine
          x={percent(scale, breakEven)}
          colour="var(--color-break-even)"
          width={2}
          mark="break-even"
          isDashed
        />
      )}
      {estimate !== null && <EstimateTick x={percent(scale, estimate)} middle={middle} isThin={isThin} />}
    </svg>
  );
}

type EdgedLineProps = { x: string; colour: string; width: number; mark?: string; isDashed?: boolean };

/** A line over the whole height, edged with paper, so that it can be followed across a dark interval, in grey too. */
function EdgedLine({ x, colour, width, mark, isDashed = false }: EdgedLineProps) {
  const ends = { x1: x, x2: x, y1: '0', y2: '100%' };
  return (
    <>
      <line {...ends} stroke="var(--color-paper)" strokeWidth={width + 2} />
      <line
        {...ends}
        data-mark={mark}
        stroke={colour}
        strokeWidth={width}
        strokeDasharray={isDashed ? '5 4' : undefined}
      />
    </>
  );
}

function spanOf(scale: Scale, { low, high }: Interval): { x: string; width: string } {
  const start = placeOnScale(scale, low);
  return { x: `${start}%`, width: `${placeOnScale(scale, high) - start}%` };
}

/** Edged like the lines; heavier and shorter than they are, so that it is not taken for one. */
function EstimateTick({ x, middle, isThin }: { x: string; middle: number; isThin: boolean }) {
  const ends = { x1: x, x2: x, y1: middle - 14, y2: middle + 14 };
  return (
    <g data-mark="estimate">
      {!isThin && <line {...ends} stroke="var(--color-paper)" strokeWidth="6" />}
      <line
        {...ends}
        stroke={isThin ? 'var(--color-open)' : 'var(--color-ink)'}
        strokeWidth="3"
        strokeDasharray={isThin ? '3 3' : undefined}
      />
    </g>
  );
}

type GapLabelProps = { scale: Scale; value: number; children: string; className?: string };

/** Words at a mark, centred on it and kept inside the drawing; an arrow where the mark lies beyond its edge. */
export function GapLabel({ scale, value, children, className = '' }: GapLabelProps) {
  const words = isOnScale(scale, value) ? children : value < 0 ? `← ${children}` : `${children} →`;
  return (
    <span
      aria-hidden="true"
      className={`absolute -translate-x-1/2 whitespace-nowrap text-sm print:bg-card ${className}`}
      style={{ left: labelLeft(scale, value, `${words.length * 0.29}em`) }}
    >
      {words}
    </span>
  );
}
