import { screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useLocation } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import type { WeighUpLine } from '#shared/weigh-up.ts';
import { Toaster } from '#src/components/toaster.tsx';
import { WeighUpsPage } from '#src/features/weigh-up/weigh-ups-page.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildWeighUp, idOf } from '#tests/client/support/weigh-up-factory.ts';

const line = (n: number, growerName: string, change: Partial<WeighUpLine> = {}): WeighUpLine => {
  const { cropName, regionName, farmName, currentVarietyName, updatedAt } = buildWeighUp();
  return {
    ...{ id: idOf(n), growerName, cropName, regionName, farmName, currentVarietyName, updatedAt },
    ...{ candidates: 2, seasonFrom: 2022, seasonTo: 2024, decision: null, archivedAt: null },
    ...change,
  };
};

const decided = { choice: 'candidate', varietyName: 'Ostermoor', areaHectares: 40 } as const;
const lines = [
  line(1, 'Maren Oske'),
  line(2, 'Ada Quern', { seasonFrom: 2023, seasonTo: 2025, decision: decided }),
  line(3, 'Bo Tithe', { cropName: { en: 'Barley', fr: 'Orge' } }),
  line(4, 'Cy Fallow', { archivedAt: '2026-01-01T00:00:00.000Z' }),
];

/** Serves the list, and archives as the server does. */
function serve(held: WeighUpLine[] = lines): unknown[] {
  let now = held;
  const asked: unknown[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    if (init.method === 'PUT') {
      const { isArchived } = JSON.parse(String(init.body));
      asked.push([path, isArchived]);
      const archivedAt = isArchived ? '2026-12-01T00:00:00.000Z' : null;
      now = now.map((one) => (path.includes(one.id) ? { ...one, archivedAt } : one));
      return Promise.resolve(Response.json({ archivedAt }));
    }
    if (init.method === 'POST') {
      asked.push(path);
      return Promise.resolve(Response.json({ weighUp: buildWeighUp({ id: idOf(77) }) }));
    }
    return Promise.resolve(Response.json(path === '/api/weigh-ups' ? { weighUps: now } : { drafts: [] }));
  });
  return asked;
}

function Address() {
  const { pathname, search } = useLocation();
  return <output aria-label="address">{pathname + search}</output>;
}

const open = async (at = '/weigh-ups') => {
  const user = userEvent.setup();
  await renderClient(
    <>
      <WeighUpsPage />
      <Address />
      <Toaster />
    </>,
    { at, namespaces: ['record', 'weigh-up', 'errors', 'common'] },
  );
  await screen.findByRole('search');
  return user;
};

const growers = () => screen.queryAllByRole('rowheader').map((cell) => cell.textContent.split('Tallow')[0]);
const address = () => screen.getByLabelText('address').textContent;

describe('the list of weigh-ups', () => {
  it('leaves the archived ones out, and tells what was decided', async () => {
    serve();
    await open();
    expect(growers()).toEqual(['Maren Oske', 'Ada Quern', 'Bo Tithe']);
    expect(screen.getByText('Ostermoor, on 40 ha')).toBeTruthy();
  });

  it('filters by crop, season and decision, and keeps it all in the address', async () => {
    serve();
    const user = await open();
    await user.selectOptions(screen.getByLabelText('Crop'), 'Barley');
    expect(growers()).toEqual(['Bo Tithe']);
    await user.selectOptions(screen.getByLabelText('Crop'), 'All');
    await user.selectOptions(screen.getByLabelText('Season'), '2025');
    expect(growers()).toEqual(['Ada Quern']);
    await user.selectOptions(screen.getByLabelText('Decision'), 'Not decided');
    expect(growers()).toEqual([]);
    expect(address()).toBe('/weigh-ups?season=2025&decided=no');
    await user.click(screen.getByRole('button', { name: 'Clear search and filters' }));
    expect(growers()).toHaveLength(3);
    expect(address()).toBe('/weigh-ups');
  });

  it('opens as its address says', async () => {
    serve();
    await open('/weigh-ups?q=cy&shown=archived');
    expect(growers()).toEqual(['Cy Fallow']);
  });

  it('finds a weigh-up by the variety that was chosen', async () => {
    serve();
    await open('/weigh-ups?q=ostermoor');
    expect(growers()).toEqual(['Ada Quern']);
  });

  it('archives with a way back', async () => {
    const asked = serve();
    const user = await open();
    await user.click(screen.getByRole('button', { name: /Archive the weigh-up of Bo Tithe/ }));
    await waitFor(() => expect(growers()).toEqual(['Maren Oske', 'Ada Quern']));
    await user.click(await screen.findByRole('button', { name: 'Undo' }));
    await waitFor(() => expect(growers()).toContain('Bo Tithe'));
    expect(asked).toEqual([
      [`/api/weigh-ups/${idOf(3)}/archived`, true],
      [`/api/weigh-ups/${idOf(3)}/archived`, false],
    ]);
  });

  it('carries a question into the next season, and opens it', async () => {
    const asked = serve();
    const user = await open();
    await user.click(screen.getByRole('button', { name: /Carry the weigh-up of Maren Oske/ }));
    await waitFor(() => expect(address()).toBe(`/weigh-ups/${idOf(77)}`));
    expect(asked).toEqual([`/api/weigh-ups/${idOf(1)}/duplicates`]);
  });
});
