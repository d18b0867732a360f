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

const manyRated = (count: number) =>
  Array.from({ length: count }, (_, n) =>
    buildCandidate({
      varietyId: idOf(10 + n),
      varietyName: `Variety ${n + 1}`,
      traits: [rating({ trials: 6, lower: n, higher: 0 })],
    }),
  );

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

  it('say which way a trait is better, by which its counts and verdicts are read', async () => {
    await show([rating({ trials: 6, lower: 4, higher: 1 })]);
    expect(text()).toContain('lodging (1–9)6 trials · lower is better');
  });

  it.each([
    [5, 1],
    [6, 0],
    [8, 0],
  ])('of %i candidates stand in %i table, and each under its name', async (count, tables) => {
    const candidates = manyRated(count);
    await renderClient(<OtherTraits candidates={candidates} traits={[lodging]} currentName="Brindle" />, {
      namespaces: ['verdicts'],
    });
    expect(screen.queryAllByRole('table')).toHaveLength(tables);
    for (const { varietyName } of candidates) expect(screen.getAllByText(varietyName).length).toBeTruthy();
    if (tables > 0) return;
    const place = screen.getByText('Variety 4').parentElement;
    expect(place?.textContent).toContain('lower in 3, higher in 0 of 6 trials');
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
