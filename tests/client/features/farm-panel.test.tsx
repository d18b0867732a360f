import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import type { WeighUp } from '#shared/weigh-up.ts';
import { FarmPanel } from '#src/features/weigh-up/farm-panel.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildResult, buildWeighUp, idOf } from '#tests/client/support/weigh-up-factory.ts';

const catalogue = {
  regions: [
    { id: idOf(70), slug: 'lower', name: { en: 'Lower Velmar', fr: 'Bas-Velmar' }, publishedTrials: {} },
  ],
  sites: [],
  places: [
    {
      id: idOf(2),
      name: 'Penhollow',
      regionId: idOf(70),
      latitude: 47.55,
      longitude: -38.62,
      seasonRainMm: 322,
      heatSumDegreeDays: 1375,
      soilTexture: 'loam',
    },
  ],
  crops: [],
};

type Saved = { revision: number; weighUp: Record<string, unknown> };

/** Answers like the server, and keeps what was saved. */
function serve(): Saved[] {
  const saved: Saved[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    if (path === '/api/catalogue') return Promise.resolve(Response.json(catalogue));
    const body: Saved = JSON.parse(String(init.body));
    saved.push(body);
    const weighUp = { ...buildWeighUp(), ...body.weighUp, revision: body.revision + 1 };
    return Promise.resolve(Response.json({ weighUp, result: buildResult([]) }));
  });
  return saved;
}

async function open(change: Partial<WeighUp> = {}, hasUnsaved = false) {
  const user = userEvent.setup();
  await renderClient(<FarmPanel weighUp={buildWeighUp(change)} hasUnsaved={hasUnsaved} />, {
    at: '/',
    namespaces: ['weigh-up', 'errors'],
  });
  const place = await screen.findByLabelText('Town or coordinates');
  return { user, place };
}

const nearest = () =>
  within(screen.getByLabelText('Trials that answer')).getByRole<HTMLOptionElement>('option', {
    name: 'Of the sites nearest the farm',
  });

describe('the farm of a weigh-up', () => {
  it('takes a place with its normals, and saves the whole question with it', async () => {
    const saved = serve();
    const { user, place } = await open();
    expect(nearest().disabled).toBe(true);
    await user.type(place, 'Penhollow');
    await user.tab();
    expect(place).toHaveProperty('value', 'Penhollow, Lower Velmar');
    expect(screen.getByLabelText('Rain in season')).toHaveProperty('value', '322');
    expect(nearest().disabled).toBe(false);
    await user.selectOptions(screen.getByLabelText('Trials that answer'), nearest());
    await user.type(screen.getByLabelText('Usual yield'), '4.5');
    await user.click(screen.getByRole('button', { name: 'Weigh again for this farm' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]).toMatchObject({
      revision: 3,
      weighUp: {
        growerName: 'Maren Oske',
        areaHectares: 120,
        farmLatitude: 47.55,
        farmLongitude: -38.62,
        farmSeasonRainMm: 322,
        farmHeatSumDegreeDays: 1375,
        farmSoilTexture: 'loam',
        usualYield: 4.5,
        trialChoice: 'nearest',
        includeNeighbours: false,
      },
    });
  });

  it('says what it does not know, keeps what was typed, and takes coordinates', async () => {
    const saved = serve();
    const { user, place } = await open();
    await user.type(place, 'Nowhere');
    await user.tab();
    expect(screen.getByText(/no town or trial site of that name/)).toBeTruthy();
    expect(place).toHaveProperty('value', 'Nowhere');
    await user.clear(place);
    await user.type(place, '46.9, -38.1');
    await user.tab();
    expect(screen.queryByText(/no town or trial site of that name/)).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Weigh again for this farm' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]?.weighUp).toMatchObject({
      farmLatitude: 46.9,
      farmLongitude: -38.1,
      farmSeasonRainMm: null,
      trialChoice: 'region',
    });
  });

  it('lets go of the nearest sites with the place', async () => {
    const saved = serve();
    const { user, place } = await open({
      farmLatitude: 47.55,
      farmLongitude: -38.62,
      farmSeasonRainMm: 300,
      trialChoice: 'nearest',
    });
    expect(place).toHaveProperty('value', 'Penhollow, Lower Velmar');
    expect(screen.getByLabelText('Rain in season')).toHaveProperty('value', '300');
    await user.clear(place);
    await user.tab();
    await user.click(screen.getByRole('button', { name: 'Weigh again for this farm' }));
    await waitFor(() => expect(saved).toHaveLength(1));
    expect(saved[0]?.weighUp).toMatchObject({
      farmLatitude: null,
      farmSeasonRainMm: null,
      trialChoice: 'region',
    });
  });

  it('waits for the numbers of the money panel to be saved', async () => {
    serve();
    await open({}, true);
    expect(screen.getByText(/Save or reset your numbers first/)).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Weigh again for this farm' })).toHaveProperty(
      'disabled',
      true,
    );
  });

  it('refuses a yield that is none, in words beside the field', async () => {
    const saved = serve();
    const { user } = await open();
    await user.type(screen.getByLabelText('Usual yield'), 'good');
    await user.click(screen.getByRole('button', { name: 'Weigh again for this farm' }));
    expect(await screen.findByText(/Please enter a number/)).toBeTruthy();
    expect(saved).toHaveLength(0);
  });
});
