import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it } from 'vitest';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

type Site = { name: string; mean: number | null };

const sites: Site[] = [
  { name: 'Wyke', mean: 4.2 },
  { name: 'Écluse', mean: null },
  { name: 'Alder', mean: 10.1 },
  { name: 'Foss', mean: 5 },
];
const columns: Column<Site>[] = [
  { id: 'name', header: 'Site', cell: (site) => site.name, sortValue: (site) => site.name },
  { id: 'mean', header: 'Mean', cell: (site) => site.mean, sortValue: (site) => site.mean, align: 'end' },
];

const table = <DataTable caption="Sites" columns={columns} rows={sites} rowKey={(site) => site.name} />;
const order = () => screen.getAllByRole('rowheader').map((cell) => cell.textContent);

describe('the table', () => {
  it('sorts by a figure both ways and leaves what has none last', async () => {
    await renderClient(table);
    expect(order()).toEqual(['Wyke', 'Écluse', 'Alder', 'Foss']);
    const head = screen.getByRole('button', { name: /Mean/ });
    await userEvent.click(head);
    expect(order()).toEqual(['Wyke', 'Foss', 'Alder', 'Écluse']);
    expect(screen.getByRole('columnheader', { name: /Mean/ }).getAttribute('aria-sort')).toBe('ascending');
    await userEvent.click(head);
    expect(order()).toEqual(['Alder', 'Foss', 'Wyke', 'Écluse']);
    expect(screen.getByRole('columnheader', { name: /Mean/ }).getAttribute('aria-sort')).toBe('descending');
  });

  it('sorts names as people do, accents beside their letter', async () => {
    await renderClient(table, { language: 'fr' });
    await userEvent.click(screen.getByRole('button', { name: /Site/ }));
    expect(order()).toEqual(['Alder', 'Écluse', 'Foss', 'Wyke']);
  });

  it('is sorted by a chooser too, for where its headings are not in view', async () => {
    await renderClient(table);
    await userEvent.selectOptions(screen.getByLabelText('Sort by'), 'Mean');
    expect(order()).toEqual(['Wyke', 'Foss', 'Alder', 'Écluse']);
    await userEvent.click(screen.getByRole('button', { name: /Ascending/ }));
    expect(order()).toEqual(['Alder', 'Foss', 'Wyke', 'Écluse']);
    await userEvent.selectOptions(screen.getByLabelText('Sort by'), 'As listed');
    expect(order()).toEqual(['Wyke', 'Écluse', 'Alder', 'Foss']);
  });

  it('is named and has its rows headed', async () => {
    await renderClient(table);
    const found = screen.getByRole('table', { name: 'Sites' });
    expect(within(found).getAllByRole('row')).toHaveLength(5);
  });
});
