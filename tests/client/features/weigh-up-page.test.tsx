import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { Route, Routes } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { paths } from '#src/paths.ts';
import { WeighUpPage } from '#src/features/weigh-up/weigh-up-page.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildResult, buildWeighUp } from '#tests/client/support/weigh-up-factory.ts';

const weighUp = buildWeighUp();
const opened = { weighUp, result: buildResult([buildCandidate()]) };
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
      traits: [],
      varieties: [],
      seasons: [2026],
    },
  ],
};

type Asked = { method: string; path: string; body: unknown };

/** Answers like the server and keeps what was asked. */
function serve(answerToSave: (asked: Asked) => Response, answer: unknown = opened): Asked[] {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const call = { method: init.method ?? 'GET', path, body: JSON.parse(String(init.body ?? 'null')) };
    asked.push(call);
    if (call.method === 'PUT') return Promise.resolve(answerToSave(call));
    if (path === '/api/catalogue') return Promise.resolve(Response.json(catalogue));
    if (path.endsWith('/grower-copies'))
      return Promise.resolve(Response.json({ copies: [], isMailSetUp: false }));
    return Promise.resolve(Response.json(answer));
  });
  return asked;
}

const open = () =>
  renderClient(
    <Routes>
      <Route path={paths.weighUp} element={<WeighUpPage />} />
    </Routes>,
    {
      at: `/weigh-ups/${weighUp.id}`,
      namespaces: ['weigh-up', 'verdicts', 'cautions', 'method', 'drawings'],
    },
  );

const money = () => screen.findByRole('region', { name: 'Your numbers' });

afterEach(() => vi.unstubAllGlobals());

describe('the money panel', () => {
  it('reckons the return anew while a price is typed, and saves under the revision it was read at', async () => {
    const asked = serve(() => Response.json({ ...opened, weighUp: { ...weighUp, revision: 4 } }));
    await open();
    const panel = within(await money());
    expect(screen.getByText('+$78/ha')).toBeTruthy();
    const [haulage] = panel.getAllByLabelText('Haulage');
    if (!haulage) throw new Error('no field for haulage');
    const user = userEvent.setup();
    await user.clear(haulage);
    await user.type(haulage, '62');
    // 0.4 × (290 − 62 − 8) − 30 = 58
    expect(screen.getByText('+$58/ha')).toBeTruthy();
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    await waitFor(() => expect(asked.some((call) => call.method === 'PUT')).toBe(true));
    const sent = asked.find((call) => call.method === 'PUT');
    expect(sent?.body).toMatchObject({
      revision: 3,
      weighUp: { assumptions: { haulagePerTonne: 62, priceMiddle: 290 }, areaHectares: 120 },
    });
  });

  it('keeps the last figures and says so beside the field when a number does not fit', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const low = panel.getByLabelText('Low');
    await user.clear(low);
    await user.type(low, '400');
    expect(await panel.findByText(/low price must not be above the middle/)).toBeTruthy();
    expect(screen.getByText('+$78/ha')).toBeTruthy();
    expect(panel.getByText(/Some numbers do not fit/)).toBeTruthy();
  });

  it('overwrites nothing silently when somebody saved in between', async () => {
    const refused = { error: { code: 'revision-conflict' } };
    serve(() => Response.json(refused, { status: 409 }));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const area = panel.getByLabelText('Area');
    await user.clear(area);
    await user.type(area, '80');
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    expect(await panel.findByText('Saved elsewhere in the meantime')).toBeTruthy();
    expect(area).toHaveProperty('value', '80');
  });

  it('makes no copy of numbers that are not saved', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const make = screen.getByRole('button', { name: 'Make a grower copy' });
    expect(make).toHaveProperty('disabled', false);
    await user.type(panel.getByLabelText('Area'), '5');
    expect(make).toHaveProperty('disabled', true);
  });
});

describe('a candidate’s row', () => {
  it('opens to sentences with both intervals, each with its level and what it is of', async () => {
    serve(() => Response.json(opened));
    await open();
    await userEvent.setup().click(await screen.findByRole('button', { name: /Ostermoor/ }));
    expect(
      screen.getByText(/region’s average over seasons, the gap lies between \+0\.20 and \+0\.60/),
    ).toBeTruthy();
    expect(screen.getByText(/95% interval\)/)).toBeTruthy();
    expect(
      screen.getByText(/your own land next season, expect anything between 0\.00 and \+0\.80/),
    ).toBeTruthy();
    expect(screen.getByText(/about 1 time in 250/)).toBeTruthy();
    expect(screen.getByText('a price under $95/t')).toBeTruthy();
  });
});

describe('an answer that no trial of the region stands behind', () => {
  it('says so before the verdict, once', async () => {
    const regions = [{ en: 'Upper Velmar', fr: 'Haut-Velmar' }];
    const stop = {
      code: 'no-trial-in-region' as const,
      severity: 'stop' as const,
      values: { context: 'elsewhere', regions },
    };
    const result = { ...opened.result, cautions: [stop] };
    serve(() => Response.json(opened), { weighUp, result });
    await open();
    const said = await screen.findByText(/come from other regions alone \(Upper Velmar\)/);
    const verdict = screen.getByText(/is really ahead of Brindle/);
    expect(said.compareDocumentPosition(verdict) & Node.DOCUMENT_POSITION_FOLLOWING).not.toBe(0);
    expect(screen.getAllByText(/come from other regions alone/)).toHaveLength(1);
  });
});
