import { Fragment } from 'react';
import { ResponsiveBar, type BarCustomLayerProps } from '@nivo/bar';
import type { EntryMean, MeansScale } from './means-scale.ts';

type MeansPlotProps = {
  /** Highest first. */
  means: readonly EntryMean[];
  scale: MeansScale;
  lsd: number | null;
  formatMean: (mean: number) => string;
};

type Datum = { entry: string; mean: number };

const rowHeight = 30;
const rulerHeight = 34;
/** Room for the figure behind each mark. */
const figureWidth = 56;
const fontSize = 14;

/** Width of the longest name at 14 px, within what a phone can spare. */
function nameWidth(means: readonly EntryMean[]): number {
  const longest = Math.max(...means.map((entry) => entry.entry.length));
  return Math.min(Math.max(longest * 8.2 + 16, 70), 164);
}

function shorten(name: string): string {
  return name.length > 18 ? `${name.slice(0, 17)}…` : name;
}

/** The chart itself, in a chunk of its own with nivo: bars from zero, or points on a cut scale. */
export function MeansPlot({ means, scale, lsd, formatMean }: MeansPlotProps) {
  // nivo lays the first entry lowest.
  const data: Datum[] = means.map(({ entry, mean }) => ({ entry, mean })).reverse();
  return (
    <div aria-hidden="true" style={{ height: means.length * rowHeight + rulerHeight }}>
      <ResponsiveBar<Datum>
        data={data}
        keys={['mean']}
        indexBy="entry"
        layout="horizontal"
        margin={{ top: 0, right: figureWidth, bottom: rulerHeight, left: nameWidth(means) }}
        padding={0.35}
        valueScale={{ type: 'linear', min: scale.low, max: scale.high, nice: false, clamp: true }}
        colors={() => 'var(--color-level)'}
        enableLabel={false}
        enableGridX={false}
        enableGridY={!scale.isFromZero}
        axisBottom={null}
        axisLeft={{ tickSize: 0, tickPadding: 10, format: shorten }}
        animate={false}
        isInteractive={false}
        theme={{
          text: { fontFamily: 'inherit', fontSize, fill: 'var(--color-ink)' },
          axis: { ticks: { text: { fontSize, fill: 'var(--color-ink)' } } },
          grid: { line: { stroke: 'var(--color-rule)' } },
        }}
        layers={[
          'grid',
          'axes',
          ...(scale.isFromZero ? (['bars'] as const) : []),
          (layer) => <Figures {...layer} isPoint={!scale.isFromZero} formatMean={formatMean} />,
          (layer) => <LsdRuler {...layer} lsd={lsd} low={scale.low} />,
        ]}
      />
    </div>
  );
}

type FiguresProps = BarCustomLayerProps<Datum> & { isPoint: boolean; formatMean: (mean: number) => string };

/** The figure behind each mark, and the mark itself where it is a point. */
function Figures({ bars, xScale, innerWidth, isPoint, formatMean }: FiguresProps) {
  return bars.map((bar) => {
    const mean = bar.data.data.mean;
    const x = Number(xScale(mean));
    const y = bar.y + bar.height / 2;
    return (
      <Fragment key={bar.key}>
        {isPoint && <circle cx={x} cy={y} r={5.5} fill="var(--color-level)" />}
        <text
          x={innerWidth + figureWidth}
          y={y}
          textAnchor="end"
          dominantBaseline="central"
          fontSize={fontSize}
          fill="var(--color-ink)"
        >
          {formatMean(mean)}
        </text>
      </Fragment>
    );
  });
}

type LsdRulerProps = BarCustomLayerProps<Datum> & { lsd: number | null; low: number };

/** The LSD at the chart's own scale: what two marks must be apart to be told apart. */
function LsdRuler({ xScale, innerHeight, lsd, low }: LsdRulerProps) {
  if (lsd === null) return null;
  const start = Number(xScale(low));
  const end = Number(xScale(low + lsd));
  const y = innerHeight + 18;
  return (
    <path
      d={`M${start} ${y - 7}v14M${start} ${y}H${end}M${end} ${y - 7}v14`}
      stroke="var(--color-ink)"
      strokeWidth="2"
      fill="none"
    />
  );
}
