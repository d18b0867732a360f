import { screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { NewWeighUpPage } from '#src/features/weigh-up/new-weigh-up-page.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import {
  assumptions,
  buildCandidate,
  buildResult,
  buildWeighUp,
  idOf,
} from '#tests/client/support/weigh-up-factory.ts';

const variety = (n: number, name: string) => ({
  ...{ id: idOf(n), name, aliases: [], isCheck: false },
  firstSeason: null,
});
const region = {
  id: idOf(81),
  slug: 'north',
  name: { en: 'North', fr: 'Nord' },
  publishedTrials: { pea: 6 },
};
const catalogue = {
  ...{ sites: [], places: [], regions: [region] },
  crops: [
    {
      ...{ id: idOf(80), slug: 'pea', name: { en: 'Pea', fr: 'Pois' }, eppoCode: 'PIBSX' },
      ...{ standardMoisturePercent: 16, bushelWeightLb: 60, cvLimitPercent: 18, traits: [] },
      ...{ varieties: [variety(1, 'Brindle'), variety(2, 'Ostermoor'), variety(3, 'Anvil')] },
      seasons: [2026],
    },
  ],
};
const me = {
  ...{ id: idOf(9), name: 'Ines', email: 'ines@example.org', language: 'en' },
  ...{ role: 'advisor', regionIds: [region.id], phone: null },
};

/** Only Ostermoor stands in the trials; what is stored is kept. */
function serve(): unknown[] {
  const stored: unknown[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const answer = (body: unknown) => Promise.resolve(Response.json(body));
    if (path === '/api/catalogue') return answer(catalogue);
    if (path === '/api/me') return answer({ me });
    if (path.startsWith('/api/candidates'))
      return answer({ assumptions, result: buildResult([buildCandidate()]) });
    if (path.startsWith('/api/weigh-up-drafts')) return answer({ drafts: [] });
    if (init.method === 'POST') stored.push(JSON.parse(String(init.body)));
    return answer({ weighUp: buildWeighUp(), weighUps: [] });
  });
  return stored;
}

const open = (query: string, language: 'en' | 'fr' = 'en') =>
  renderClient(<NewWeighUpPage />, {
    language,
    at: `/weigh-ups/new?crop=pea&region=north&current=${idOf(1)}&${query}`,
    namespaces: ['weigh-up', 'record', 'verdicts', 'cautions', 'drawings', 'errors'],
  });

const gone = 'Anvil stood in none of the trials that answer now, so it is not weighed.';

describe('a candidate of the address that stands in no trial', () => {
  it('is left out by name, and the others are weighed', async () => {
    const stored = serve();
    await open(`candidates=${idOf(3)},${idOf(2)}`);
    const user = userEvent.setup();
    expect(await screen.findByText(gone, { exact: false })).toBeTruthy();
    expect(screen.getByText('1 kept. Two to eight make a list.')).toBeTruthy();
    await user.type(screen.getByLabelText('Grower'), 'Ada');
    await user.type(screen.getByLabelText('Farm'), 'Low Field');
    await user.type(screen.getByLabelText('Area'), '40');
    await user.click(screen.getByRole('button', { name: 'Weigh them up' }));
    await waitFor(() => expect(stored).toHaveLength(1));
    expect(stored[0]).toMatchObject({ candidateIds: [idOf(2)] });
  });

  it('is no pair: the field is empty, it is said why, and nothing is weighed', async () => {
    const stored = serve();
    await open(`question=pair&candidates=${idOf(3)}`);
    const user = userEvent.setup();
    expect(await screen.findByText(gone, { exact: false })).toBeTruthy();
    expect(screen.getByLabelText(/The candidate of the pair/)).toHaveProperty('value', '');
    await user.type(screen.getByLabelText('Grower'), 'Ada');
    await user.type(screen.getByLabelText('Farm'), 'Low Field');
    await user.type(screen.getByLabelText('Area'), '40');
    await user.click(screen.getByRole('button', { name: 'Weigh them up' }));
    // The button stands a screen further down than what is said.
    const missing = await screen.findByText('Choose at least one candidate.');
    expect(document.activeElement).toBe(missing);
    await user.click(screen.getByRole('button', { name: 'Weigh them up' }));
    expect(document.activeElement?.textContent).toBe('Choose at least one candidate.');
    expect(stored).toEqual([]);
  });

  it('is not spoken of where all stand', async () => {
    serve();
    await open(`candidates=${idOf(2)}`);
    await screen.findByText('1 kept. Two to eight make a list.');
    expect(screen.queryByText(/stood in none/)).toBeNull();
  });
});
