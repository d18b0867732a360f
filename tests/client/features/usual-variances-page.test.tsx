import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, test, vi } from 'vitest';
import type { UsualEstimate } from '#shared/usual-variance.ts';
import { UsualVariancesPage } from '#src/features/trial-desk/usual-variances-page.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

const cropId = '00000000-0000-4000-8000-000000000001';
const trait = (n: number, slug: string, name: string, unit: string) => ({
  ...{ id: `00000000-0000-4000-8000-00000000001${n}`, slug, unit, name: { en: name, fr: name } },
  ...{ kind: 'numeric', direction: 'higher', practicalMargin: 0.1, scaleMin: null, scaleMax: null },
});
const catalogue = {
  ...{ regions: [], sites: [], places: [] },
  crops: [
    {
      ...{ id: cropId, slug: 'wheat', name: { en: 'Wheat', fr: 'Blé' }, eppoCode: 'TRZAX' },
      ...{
        standardMoisturePercent: 14.5,
        bushelWeightLb: 60,
        cvLimitPercent: 15,
        varieties: [],
        seasons: [],
      },
      traits: [trait(0, 'yield', 'Yield', 't/ha'), trait(1, 'protein', 'Protein', '%')],
    },
  ],
};

const estimateOf = (n: number, site: number): UsualEstimate => ({
  id: `00000000-0000-4000-8000-00000000002${n}`,
  sd: { site, season: 0.12, rest: 0.24 },
  intervals: {
    site: { low: 0.11, high: 0.31, level: 0.95 },
    season: null,
    rest: { low: 0.12, high: 240, level: 0.95 },
  },
  ...{ environments: 36, seasons: 4, entries: 18, engineVersion: '1' },
  ...{ estimatedAt: `2026-11-0${n}T09:00:00.000Z`, estimatedBy: n === 1 ? null : 'Ines Quarrel' },
});
const usual = (estimates: UsualEstimate[]) => ({
  crops: [
    {
      cropId,
      traits: [
        { traitSlug: 'yield', mean: 6, cropDefault: { site: 0.18, season: 0.15, rest: 0.3 }, estimates },
        { traitSlug: 'protein', mean: null, cropDefault: null, estimates: [] },
      ],
    },
  ],
});

/** Answers like the server: once asked to estimate, there is a newer estimate. */
function serve(role: 'agronomist' | 'advisor', before: UsualEstimate[]): void {
  let stored = before;
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    if (path === '/api/catalogue') return Promise.resolve(Response.json(catalogue));
    if (path === '/api/me') {
      const me = {
        ...{ id: cropId, name: 'Ines', email: 'ines@example.org', role, language: 'en' },
        ...{ regionIds: [], phone: null },
      };
      return Promise.resolve(Response.json({ me }));
    }
    if (init.method !== 'POST') return Promise.resolve(Response.json(usual(stored)));
    stored = [estimateOf(2, 0.2), ...stored];
    const few = { traitSlug: 'protein', outcome: 'not-enough', environments: 4, seasons: 1, entries: 9 };
    const found = { traitSlug: 'yield', outcome: 'estimated', environments: 36, seasons: 4, entries: 18 };
    const needs = { environments: 10, seasons: 3, entries: 12 };
    return Promise.resolve(Response.json({ outcomes: [found, few], needs }));
  });
}

async function open(role: 'agronomist' | 'advisor', before: UsualEstimate[]) {
  serve(role, before);
  return renderClient(<UsualVariancesPage />, {
    at: '/desk/usual-variances?crop=wheat',
    namespaces: ['desk', 'errors'],
  });
}

test('the default stands with its source until something is estimated, in the unit and in % of the mean', async () => {
  await open('advisor', []);
  const table = await screen.findByRole('table', { name: /^Yield/ });
  const [, site] = within(table).getAllByRole('row');
  expect(site?.textContent).toMatch(/0\.18\st\/ha/);
  expect(site?.textContent).toContain('3.0%');
  expect(screen.getByText(/the default of the crop holds/)).toBeTruthy();
  expect(screen.getByText(/rest on the trials at hand alone/)).toBeTruthy();
  expect(screen.queryByRole('button', { name: /Estimate/ })).toBeNull();
});

test('an agronomist estimates anew, reads what is missing, and keeps the earlier estimate in sight', async () => {
  await open('agronomist', [estimateOf(1, 0.4)]);
  expect(await screen.findByText(/by a command from 36 site-years over 4 seasons/)).toBeTruthy();
  await userEvent.click(screen.getByRole('button', { name: /Estimate/ }));
  expect(await screen.findByText(/Protein: not enough trials.*Site-years: 4, needed 10/)).toBeTruthy();
  expect(await screen.findByText(/by Ines Quarrel from 36 site-years/)).toBeTruthy();
  const [, site, season, rest] = within(screen.getByRole('table', { name: /^Yield/ })).getAllByRole('row');
  expect(site?.textContent).toMatch(/0\.11 to 0\.31\st\/ha/);
  expect(season?.textContent).toContain('too small to show');
  expect(rest?.textContent).toMatch(/at least 0\.12\st\/ha/);
  expect(screen.getByText(/a command: site 0.40\st\/ha/)).toBeTruthy();
});
