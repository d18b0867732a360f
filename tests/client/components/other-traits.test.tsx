import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { Trait } from '#shared/catalogue.ts';
import type { TraitVerdict } from '#shared/weigh-up.ts';
import { OtherTraits } from '#src/components/other-traits.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildGap, idOf } from '#tests/client/support/weigh-up-factory.ts';

const trait = (slug: string, kind: Trait['kind'], unit: string): Trait => ({
  id: idOf(kind === 'ordinal' ? 41 : 42),
  slug,
  name: { en: slug, fr: slug },
  unit,
  kind,
  direction: 'lower',
  practicalMargin: null,
  scaleMin: 1,
  scaleMax: 9,
});
const lodging = trait('lodging', 'ordinal', '1–9');
const protein = trait('protein', 'numeric', '%');

const rating = (rated: TraitVerdict['rated']): TraitVerdict => ({
  traitSlug: 'lodging',
  kind: 'ordinal',
  verdict: null,
  gap: null,
  siteYears: 6,
  medianCandidate: 2.5,
  medianCurrent: 4,
  rated,
});

const show = (traits: TraitVerdict[]) =>
  renderClient(
    <OtherTraits
      candidates={[buildCandidate({ traits })]}
      traits={[lodging, protein]}
      currentName="Brindle"
    />,
    { namespaces: ['verdicts'] },
  );

const text = () => document.body.textContent.replaceAll('\u00a0', ' ');

describe('other traits', () => {
  it('tell ratings as medians and as counts of the trials that rated both, without a verdict', async () => {
    await show([rating({ trials: 6, lower: 4, higher: 1 })]);
    expect(text()).toContain('median 2.5 (Brindle: 4)');
    expect(text()).toContain('lower in 4, higher in 1 of 6 trials');
    expect(screen.queryByText(/Really|Neck|Not settled/)).toBeNull();
  });

  it('say where two were never rated side by side, and count nothing in answers made before it was counted', async () => {
    const first = await show([rating({ trials: 0, lower: 0, higher: 0 })]);
    expect(text()).toContain('never rated in the same trial');
    first.unmount();
    await show([rating(undefined)]);
    expect(text()).toContain('median 2.5');
    expect(text()).not.toContain('of 6 trials');
  });

  it('tell a measured trait with its gap, interval, verdict and trials', async () => {
    await show([
      {
        ...rating(undefined),
        traitSlug: 'protein',
        kind: 'numeric',
        verdict: 'behind',
        gap: buildGap(0.8, 0.3),
        siteYears: 5,
      },
    ]);
    expect(text()).toContain('+0.80%');
    expect(text()).toContain('+0.50 to +1.10%');
    expect(text()).toContain('Really behind');
    expect(text()).toContain('5 trials');
  });
});
