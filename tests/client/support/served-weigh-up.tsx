import { screen } from '@testing-library/react';
import { Route, Routes } from 'react-router-dom';
import { vi } from 'vitest';
import type { Me } from '#shared/account.ts';
import { paths } from '#src/paths.ts';
import { WeighUpPage } from '#src/features/weigh-up/weigh-up-page.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import {
  buildCandidate,
  buildGap,
  buildResult,
  buildWeighUp,
  idOf,
} from '#tests/client/support/weigh-up-factory.ts';

export const weighUp = buildWeighUp();
export const opened = { weighUp, result: buildResult([buildCandidate()]) };
const protein = {
  ...{ id: idOf(60), slug: 'protein', name: { en: 'Protein', fr: 'Protéines' }, unit: '%' },
  ...{ kind: 'numeric', direction: 'higher', practicalMargin: 0.4, scaleMin: 0, scaleMax: null },
};
/** A point of protein more than the current variety, as good as certain. */
export const withProtein = {
  ...buildResult([
    buildCandidate({
      traits: [
        {
          ...{ traitSlug: 'protein', kind: 'numeric', verdict: 'ahead', siteYears: 8 },
          ...{ medianCandidate: null, medianCurrent: null },
          gap: {
            ...buildGap(1, 0.2),
            shrunken: 1,
            ownSeason: { low: 1, high: 1, level: 0.95, se: 1e-6, df: 30 },
          },
        },
      ],
    }),
  ]),
  currentLevels: [{ traitSlug: 'protein', mean: 22, spread: 0.8, trials: 8 }],
};
const catalogue = {
  regions: [],
  sites: [],
  crops: [
    {
      id: weighUp.cropId,
      slug: 'field-pea',
      name: weighUp.cropName,
      eppoCode: 'PIBSX',
      standardMoisturePercent: 16,
      bushelWeightLb: 60,
      cvLimitPercent: 18,
      traits: [protein],
      varieties: [],
      seasons: [2026],
    },
  ],
};

type Asked = { method: string; path: string; body: unknown };

const me = {
  id: '00000000-0000-4000-8000-000000000999',
  name: 'Wren Halloway',
  email: 'wren@example.org',
  phone: null,
  role: 'advisor',
  language: 'en',
  regionIds: [],
} satisfies Me;

/** Answers like the server and keeps what was asked. */
export function serve(
  answerToSave: (asked: Asked) => Response,
  answer: () => unknown = () => opened,
): Asked[] {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const call = { method: init.method ?? 'GET', path, body: JSON.parse(String(init.body ?? 'null')) };
    asked.push(call);
    if (call.method === 'PUT') return Promise.resolve(answerToSave(call));
    if (path === '/api/me') return Promise.resolve(Response.json({ me }));
    if (path === '/api/catalogue') return Promise.resolve(Response.json(catalogue));
    if (path.endsWith('/grower-copies'))
      return Promise.resolve(Response.json({ copies: [], isMailSetUp: false }));
    return Promise.resolve(Response.json(answer()));
  });
  return asked;
}

/** Opens the page of the weigh-up, with a query such as `?open=`. */
export const open = (query = '') =>
  renderClient(
    <Routes>
      <Route path={paths.weighUp} element={<WeighUpPage />} />
    </Routes>,
    {
      at: `/weigh-ups/${weighUp.id}${query}`,
      namespaces: ['weigh-up', 'verdicts', 'cautions', 'method', 'drawings'],
    },
  );

/** The money panel. */
export const money = () => screen.findByRole('region', { name: 'Your numbers' });
