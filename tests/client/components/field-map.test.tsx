import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import type { PlotView } from '#shared/trial.ts';
import { FieldMap } from '#src/components/field-map.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

function plot(row: number, col: number, part: Partial<PlotView> = {}): PlotView {
  const plotNumber = `${row}0${col}`;
  return {
    id: plotNumber,
    plotNumber,
    entryLabel: `Entry ${col}`,
    rep: null,
    block: null,
    row,
    col,
    mainLevel: null,
    value: 5,
    residual: 0,
    excludedReason: null,
    ...part,
  };
}

const plots = [
  plot(3, 2, { residual: 0.8 }),
  plot(3, 3, { residual: -0.4 }),
  plot(4, 2, { excludedReason: 'flooded', residual: null }),
  plot(4, 3, { value: null, residual: null }),
];

const map = (given: PlotView[]) => (
  <FieldMap title="Field" plots={given} unit="t/ha" decimals={2} shade="residual" />
);

describe('the field map', () => {
  it('lays plots at their row and column, the first at the corner', async () => {
    await renderClient(map(plots));
    const cell = screen.getByTitle('403 · Entry 3');
    expect([cell.style.gridRow, cell.style.gridColumn]).toEqual(['2', '2']);
  });

  it('tells used, excluded and missing plots apart without colour', async () => {
    await renderClient(map(plots));
    const states = screen.getByRole('img').querySelectorAll('[data-state]');
    expect([...states].map((cell) => cell.getAttribute('data-state'))).toEqual([
      'used',
      'used',
      'excluded',
      'missing',
    ]);
    expect(screen.getByTitle('302 · Entry 2').textContent).toContain('+0.80');
    expect(screen.getByTitle('402 · Entry 2').textContent).toContain('excluded');
    expect(screen.getByRole('img').getAttribute('aria-label')).toBe(
      'Field map, 2 rows by 2 columns: 2 plots used, 1 excluded, 1 missing.',
    );
  });

  it('gives a screen reader the table with the reason of an exclusion', async () => {
    await renderClient(map(plots));
    const row = within(screen.getByRole('table')).getByRole('row', { name: /402/ });
    expect(row.textContent).toContain('excluded: flooded');
  });

  it('says so where the layout is not known', async () => {
    await renderClient(map([plot(1, 1, { row: null, col: null })]));
    expect(screen.getByText(/there is no map/)).toBeTruthy();
  });
});
