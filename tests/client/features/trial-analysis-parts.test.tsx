import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { AdjustedMean, PairGap, SpatialModelView, TrialAnalysisView } from '#shared/trial.ts';
import { OutcomeList } from '#src/components/analysis-notes.tsx';
import { BestTable } from '#src/components/best-table.tsx';
import { DiagnosticList } from '#src/components/diagnostic-list.tsx';
import { FactorFamilies, FactorLead } from '#src/components/factor-families.tsx';
import { LayoutCheck } from '#src/components/layout-check.tsx';
import { PairsTable } from '#src/components/pairs-table.tsx';
import { SpatialModels } from '#src/components/spatial-models.tsx';
import { useCautionItems } from '#src/use-caution-items.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';

const mean = (entry: string, value: number): AdjustedMean => ({
  entry,
  n: 4,
  mean: value,
  se: 0.1,
  df: 9,
  letters: '',
});
const gap = (a: string, b: string, estimate: number): PairGap => ({
  a,
  b,
  estimate,
  se: 0.14,
  df: 9,
  lsd: 0.32,
  p: 0.02,
});

const analysis: TrialAnalysisView = {
  trialId: '11111111-1111-4111-8111-111111111111',
  traitSlug: 'yield',
  alpha: 0.05,
  comparison: 'lsd',
  source: 'published',
  version: 1,
  kind: 'numeric',
  outcomes: [],
  method: 'ols',
  plotsTotal: 12,
  plotsUsed: 12,
  plotsExcluded: 0,
  plotsMissing: 0,
  grandMean: 5,
  residualMs: 0.04,
  residualDf: 9,
  cvPercent: 4,
  r2: 0.8,
  components: [],
  anova: [],
  means: [mean('Quill', 5.4), mean('Tallis', 5.2), mean('Merrow', 4.4)],
  gaps: [gap('Quill', 'Tallis', 0.2), gap('Quill', 'Merrow', 1)],
  lsd: { mean: 0.32, min: 0.32, max: 0.32 },
  pairsDifferent: 2,
  pairsTotal: 3,
  detectable: 0.4,
  ordinal: [],
  recoveredFrom: null,
  diagnostics: null,
  best: [],
  factors: [],
  layout: [],
  spatial: [],
  plots: [],
  cautions: [],
};

const namespaces = ['analysis' as const, 'cautions' as const];
const say = async (part: React.ReactNode, language: 'en' | 'fr' = 'en'): Promise<string> => {
  const { container } = await renderClient(part, { language, namespaces });
  return container.textContent ?? '';
};

const model = (
  code: SpatialModelView['code'],
  aic: number,
  lsd: number,
  order: string[],
): SpatialModelView => ({
  code,
  aic,
  residualMs: 0.1,
  lsd,
  means: order.map((entry, i) => ({ entry, mean: 6 - i, rank: i + 1 })),
});
const design = model('design', 36.8, 0.74, ['Quill', 'Tallis', 'Merrow']);
const surface = model('surface', 24.7, 0.54, ['Tallis', 'Merrow', 'Quill']);
const models = (...all: SpatialModelView[]) => <SpatialModels models={all} unit="t/ha" decimals={2} />;

describe('models of the field’s trend', () => {
  it('stand side by side, with what the better one changes', async () => {
    const text = await say(models(design, surface));
    expect(text).toContain('Smooth surface: fits better than the design’s model (AIC lower by 12.1).');
    expect(text).toContain('The LSD is then 0.54\u00a0t/ha instead of 0.74\u00a0t/ha.');
    expect(text).toContain('Quill from 1 to 3, Tallis from 2 to 1, Merrow from 3 to 2');
    const row = screen.getByRole('row', { name: /^Quill/ });
    expect(within(row).getByText(/4\.00.*\(rank 3\)/)).toBeTruthy();
  });

  it('say that nothing speaks for leaving the design where none fits better', async () => {
    expect(await say(models(design, { ...surface, aic: 36.8 }))).toContain('No model of a trend fits better');
    expect(await say(models(design, { ...surface, aic: 36.8 }), 'fr')).toContain('Aucun modèle de tendance');
  });

  it('warn of an LSD that is too small', async () => {
    expect(await say(models(design, { ...surface, code: 'autoregressive' }))).toContain('somewhat too small');
    expect(await say(models(design, surface))).not.toContain('somewhat too small');
  });

  it('are absent where there is nothing to set beside the design', async () => {
    expect(await say(models(design))).toBe('');
  });
});

function TrendCaution({ values }: { values: Record<string, string | number> }) {
  const [item] = useCautionItems()([{ code: 'spatial-trend', severity: 'warning', values }]);
  return item?.text;
}

describe('the caution of a trend', () => {
  const moved = { context: 'yield-moved', lsd: 0.352, usual: 0.5, variety: 'Quill', from: 9, to: 4 };

  it('gives the LSD and the variety that moves most', async () => {
    expect(await say(<TrendCaution values={moved} />)).toContain(
      'comes to 0.35\u00a0t/ha instead of 0.50\u00a0t/ha, and Quill moves from place 9 to place 4.',
    );
    expect(await say(<TrendCaution values={moved} />, 'fr')).toContain('Quill passe du rang 9 au rang 4.');
  });

  it.each(['no-better', 'beside', 'yield', 'share', 'share-moved'])(
    'has a wording for %s',
    async (context) => {
      const plain = await say(<TrendCaution values={{}} />);
      const said = await say(<TrendCaution values={{ ...moved, share: 73, context }} />);
      expect(said).not.toBe(plain);
      expect(said).not.toMatch(/\{\{|\}\}/);
    },
  );
});

describe('the comparison with the best', () => {
  const row = (entry: string, estimate: number, mayBeBest: boolean, isBest = false) => ({
    entry,
    estimate,
    lower: estimate - 0.4,
    upper: mayBeBest ? estimate + 0.4 : 0,
    mayBeBest,
    isBest,
  });
  const best = [row('Quill', 0.2, true), row('Tallis', -0.2, true), row('Merrow', -1, false)];
  const table = (rows: typeof best) => (
    <BestTable analysis={{ ...analysis, comparison: 'best', best: rows }} unit="t/ha" decimals={2} />
  );

  it('says who may be the best and who is surely not', async () => {
    const text = await say(table(best));
    expect(text).toContain('the best of this trial is one of 2: Quill and Tallis.');
    expect(text).toContain('Surely not the best here: Merrow.');
    expect(within(screen.getByRole('row', { name: /Merrow/ })).getByText('surely not')).toBeTruthy();
  });

  it('says so in French, and when one alone or all may be', async () => {
    expect(await say(table(best), 'fr')).toContain('l’une de ces 2\u202f: Quill et Tallis.');
    expect(await say(table([row('Quill', 1, true, true), row('Merrow', -1, false)]))).toContain(
      'Quill is the best of this trial.',
    );
    expect(await say(table(best.slice(0, 2)))).toContain('any of the 2 may be the best');
  });

  it('judges entries, so that the table of pairs gives no p', async () => {
    const pairs = (given: TrialAnalysisView) => (
      <PairsTable analysis={given} unit="t/ha" decimals={2} entry={null} onEntry={() => undefined} />
    );
    expect(await say(pairs({ ...analysis, comparison: 'best', best }))).not.toContain('Told apart');
    expect(await say(pairs(analysis))).toContain('Told apart');
  });
});

describe('a split plot', () => {
  const main = {
    name: 'main',
    means: [mean('treated', 5.2), mean('untreated', 4.8)],
    gaps: [gap('untreated', 'treated', -0.4)],
    lsd: { mean: 0.3, min: 0.3, max: 0.3 },
  };
  const cells = { ...main, name: 'main:sub', means: [mean('treated:Quill', 5.6)], gaps: [] };
  const split = { ...analysis, factors: [main, cells] };

  it('says which factor is which', async () => {
    const text = await say(<FactorLead analysis={split} />);
    expect(text).toContain('the main plots carry the main factor (treated and untreated)');
    expect(text).toContain('the subplots carry the 3 varieties');
  });

  it('gives means, LSD and gaps, the higher level first', async () => {
    const text = await say(<FactorFamilies analysis={split} unit="t/ha" decimals={2} />);
    expect(text).toContain('Levels are told apart when they differ by 0.30\u00a0t/ha or more (5%).');
    expect(text).toContain('treated over untreated');
    expect(text).toContain('+0.40\u00a0t/ha');
    expect(text).toContain('Means of Main factor × Sub factor');
    expect(text).toContain('treated · Quill');
  });

  it('is told from a factorial, whose factors go by their names', async () => {
    const factorial = { ...analysis, factors: [{ ...main, name: 'nitrogen' }] };
    expect(await say(<FactorLead analysis={factorial} />)).toContain('nitrogen (treated and untreated)');
  });
});

describe('checks', () => {
  it('of the design say what is wrong, or that nothing is', async () => {
    expect(await say(<LayoutCheck findings={[]} />)).toContain('lies as its design asks');
    const missing = { entry: 'Quill', blocks: '2, 3', count: 2 };
    const text = await say(
      <LayoutCheck findings={[{ code: 'entry-missing-from-block', values: missing }]} />,
    );
    expect(text).toContain('Quill is missing from blocks 2, 3');
    expect(await say(<LayoutCheck findings={null} />)).toBe('');
  });

  it('of what is left name each test that was made', async () => {
    const test = { f: 21.33, df1: 1, df2: 24, p: 0.0001 };
    const text = await say(
      <DiagnosticList
        diagnostics={{
          shapiroWilk: null,
          brownForsythe: null,
          brownForsytheBlocks: null,
          largestStudentised: null,
          nonAdditivity: test,
          rowTrend: null,
          colTrend: test,
          moran: { i: 0.39, expected: -0.05, p: 0.0002 },
          repeatability: 0.84,
        }}
      />,
    );
    expect(text).toContain('No drift by column number: F\u00a021.33 on 1 and 24 df, p\u00a0<');
    expect(text).toContain('Tukey’s one degree of freedom');
    expect(text).toContain('Moran');
    expect(text).toContain('0.84');
    expect(text).not.toContain('by row number');
  });
});

it('outcomes name terms of the model in words and plots at fault by number', async () => {
  const text = await say(
    <OutcomeList
      outcomes={[
        { code: 'component-at-zero', values: { components: 'rep:block' } },
        { code: 'missing-level', values: { context: 'plots', plots: '103, 104' } },
      ]}
    />,
  );
  expect(text).toContain('The variance of Replicate × Block comes out at zero');
  expect(text).toContain('as the design needs: 103, 104.');
});
