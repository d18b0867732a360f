import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it } from 'vitest';
import { placeOnScale } from '#shared/gap-scale.ts';
import { scaleOfRows } from '#shared/gap-rows.ts';
import { GapStrip, type GapStripRow } from '#src/components/gap-strip.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

const at95 = (low: number, high: number) => ({ low, high, level: 0.95 });

const ostermoor: GapStripRow = {
  id: 'o',
  name: 'Ostermoor',
  verdict: 'ahead',
  estimate: 0.38,
  region: at95(0.17, 0.59),
  ownSeason: at95(-0.09, 0.85),
  breakEven: 0.11,
};
const haverill: GapStripRow = {
  id: 'h',
  name: 'Haverill Bay',
  verdict: 'thin',
  estimate: 1.4,
  region: null,
  ownSeason: null,
  breakEven: null,
};

const strip = (rows: GapStripRow[]) => (
  <GapStrip title="Gaps" rows={rows} currentName="Brindle" unit="t/ha" decimals={2} />
);

function markOf(picture: HTMLElement, mark: string): Element {
  const found = picture.querySelector(`[data-mark="${mark}"]`);
  if (!found) throw new Error(`no ${mark} in the strip`);
  return found;
}

describe('the gap strip', () => {
  it('places every mark by percentage on one scale for all rows', async () => {
    await renderClient(strip([ostermoor, haverill]));
    const scale = scaleOfRows([ostermoor, haverill]);
    // The other row's gap of 1.4 stretches this row's scale too.
    expect(scale.high).toBeGreaterThan(1.4);
    const picture = screen.getByRole('img', { name: /^Ostermoor/ });
    const region = markOf(picture, 'region');
    expect(region.getAttribute('x')).toBe(`${placeOnScale(scale, 0.17)}%`);
    expect(Number.parseFloat(region.getAttribute('width') ?? '')).toBeCloseTo(
      placeOnScale(scale, 0.59) - placeOnScale(scale, 0.17),
      9,
    );
    expect(markOf(picture, 'own-season').getAttribute('x')).toBe(`${placeOnScale(scale, -0.09)}%`);
    expect(markOf(picture, 'break-even').getAttribute('x1')).toBe(`${placeOnScale(scale, 0.11)}%`);
  });

  it('does not let one absurd cost press the rows together, and points to where it lies', async () => {
    const dear = { ...ostermoor, breakEven: 9 };
    expect(scaleOfRows([dear]).high).toBeLessThan(1);
    await renderClient(strip([dear]));
    expect(screen.getByRole('img').querySelector('[data-mark="break-even"]')).toBeNull();
    expect(screen.getByText('pays from +9.00 t/ha →')).toBeTruthy();
  });

  it('says each row in one sentence with its level and its unit', async () => {
    await renderClient(strip([ostermoor]));
    expect(screen.getByRole('img').getAttribute('aria-label')).toBe(
      'Ostermoor against Brindle: estimated gap +0.38\u00a0t/ha. ' +
        'Region’s average between +0.17\u00a0t/ha and +0.59\u00a0t/ha (95% interval). ' +
        'In the grower’s own next season between \u22120.09\u00a0t/ha and +0.85\u00a0t/ha (95% range). ' +
        'Pays from +0.11\u00a0t/ha.',
    );
  });

  it('names zero after the current variety and labels break-even', async () => {
    await renderClient(strip([ostermoor]));
    expect(screen.getByText('Brindle')).toBeTruthy();
    expect(screen.getByText('pays from +0.11 t/ha')).toBeTruthy();
  });

  it('shows a thin row as a dotted tick with words, and no interval', async () => {
    await renderClient(strip([{ ...haverill, region: at95(-2, 4), ownSeason: at95(-3, 5) }]));
    const picture = screen.getByRole('img', { name: /Too few trials for an interval/ });
    expect(picture.getAttribute('aria-label')).not.toContain('Region’s average');
    expect(picture.querySelector('[data-mark="own-season"]')).toBeNull();
    expect(picture.querySelector('[data-mark="region"]')).toBeNull();
    expect(markOf(picture, 'estimate').querySelector('[stroke-dasharray]')).not.toBeNull();
    expect(screen.getByText('too few trials for an interval')).toBeTruthy();
  });

  it('turns into a table with the same figures, and back', async () => {
    await renderClient(strip([ostermoor, haverill]), { language: 'fr' });
    await userEvent.click(screen.getByRole('button', { name: 'Afficher en tableau' }));
    const table = screen.getByRole('table');
    expect(screen.queryByRole('img')).toBeNull();
    const row = within(table).getByRole('row', { name: /Ostermoor/ });
    expect(row.textContent).toContain('Réellement devant');
    expect(row.textContent).toContain('+0,17 à +0,59\u00a0t/ha');
    expect(within(table).getByRole('row', { name: /Haverill Bay/ }).textContent).toContain('aucun');
    await userEvent.click(screen.getByRole('button', { name: 'Afficher en dessin' }));
    expect(screen.getAllByRole('img')).toHaveLength(2);
  });

  it('says whose average the intervals are of: not the region’s, where trials of other regions stand behind them', async () => {
    await renderClient(strip([{ ...ostermoor, isBeyondRegion: true }]));
    const user = userEvent.setup();
    expect(screen.getByText('average over these sites, 95% interval')).toBeTruthy();
    expect(screen.getByRole('img').getAttribute('aria-label')).toContain(
      'Average over the sites and seasons of these trials, some in other regions, between +0.17',
    );
    await user.click(screen.getByRole('button', { name: /table/i }));
    expect(screen.getByRole('columnheader', { name: 'Average over these sites, 95%' })).toBeTruthy();
    expect(screen.queryByText(/region’s average/i)).toBeNull();
  });
});
