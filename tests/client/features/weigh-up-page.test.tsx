import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { onSessionExpired } from '#src/api-client.ts';
import { money, open, opened, serve, weighUp, withProtein } from '#tests/client/support/served-weigh-up.tsx';
import { idOf } from '#tests/client/support/weigh-up-factory.ts';

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

  it('saves over it only when asked to, on top of what was saved meanwhile', async () => {
    const theirs = { ...weighUp, revision: weighUp.revision + 3, farmName: 'Sold meanwhile' };
    const answers = [
      () => Response.json({ error: { code: 'revision-conflict' } }, { status: 409 }),
      () => Response.json({ ...opened, weighUp: { ...theirs, areaHectares: 80 } }),
    ];
    let latest = opened;
    const asked = serve(
      () => answers.shift()?.() ?? Response.error(),
      () => latest,
    );
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    await user.clear(panel.getByLabelText('Area'));
    await user.type(panel.getByLabelText('Area'), '80');
    latest = { ...opened, weighUp: theirs };
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    await user.click(await panel.findByRole('button', { name: 'Save mine over it' }));
    await waitFor(() => expect(asked.filter(({ method }) => method === 'PUT')).toHaveLength(2));
    expect(asked.findLast(({ method }) => method === 'PUT')?.body).toMatchObject({
      revision: theirs.revision,
      weighUp: { farmName: 'Sold meanwhile', areaHectares: 80 },
    });
  });

  it('loses nothing typed when the session has run out, whether one signs in again or not', async () => {
    const signIn = vi.fn(() => Promise.resolve(false));
    onSessionExpired(signIn);
    const asked = serve(() =>
      signIn.mock.calls.length < 2
        ? Response.json({ error: { code: 'not-signed-in' } }, { status: 401 })
        : Response.json({ ...opened, weighUp: { ...weighUp, areaHectares: 80 } }),
    );
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    await user.clear(panel.getByLabelText('Area'));
    await user.type(panel.getByLabelText('Area'), '80');
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    expect((await panel.findByRole('alert')).textContent).not.toBe('');
    expect(panel.getByLabelText('Area')).toHaveProperty('value', '80');
    signIn.mockResolvedValueOnce(true);
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    await waitFor(() => expect(panel.queryByRole('button', { name: 'Save these numbers' })).toBeNull());
    expect(panel.getByLabelText('Area')).toHaveProperty('value', '80');
    expect(asked.findLast(({ method }) => method === 'PUT')?.body).toMatchObject({
      weighUp: { areaHectares: 80 },
    });
  });

  it('refuses a cost that nobody pays, and takes it back as soon as the price explains it', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const dear = /More than 50 tonnes of the crop would sell for/;
    await user.clear(panel.getByLabelText('Seed, Ostermoor'));
    await user.type(panel.getByLabelText('Seed, Ostermoor'), '15000');
    expect(await panel.findByText(dear)).toBeTruthy();
    expect(panel.getByText(/Some numbers do not fit/)).toBeTruthy();
    // 50 × 310 are 15,500; a price that is half typed marks no cost.
    await user.clear(panel.getByLabelText('Middle'));
    await user.type(panel.getByLabelText('Middle'), '1');
    await waitFor(() => expect(panel.queryByText(dear)).toBeNull());
    await user.clear(panel.getByLabelText('Middle'));
    await user.type(panel.getByLabelText('Middle'), '310');
    await waitFor(() => expect(panel.queryByText(dear)).toBeNull());
    expect(panel.queryByText(/Some numbers do not fit/)).toBeNull();
  });

  it('opens with what was saved before there were limits, reckons with it and marks it', async () => {
    const { seedCosts } = weighUp.assumptions;
    const dear = { seedPerHectare: 999_999, treatmentPerHectare: 0, royaltyPerHectare: 0 };
    const assumptions = { ...weighUp.assumptions, seedCosts: { ...seedCosts, [idOf(2)]: dear } };
    serve(
      () => Response.json(opened),
      () => ({ ...opened, weighUp: { ...weighUp, assumptions } }),
    );
    await open();
    const panel = within(await money());
    expect(screen.getByText('−$999,773/ha')).toBeTruthy();
    expect(panel.getByLabelText('Seed, Ostermoor')).toHaveProperty('value', '999,999');
    expect(await panel.findByText(/More than 50 tonnes of the crop would sell for/)).toBeTruthy();
  });

  it('makes no copy of numbers that are not saved', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const make = screen.getByRole('button', { name: 'Make a grower copy' });
    expect(make).toHaveProperty('disabled', false);
    await user.type(panel.getByLabelText('Area'), '5');
    await waitFor(() => expect(make).toHaveProperty('disabled', true));
  });
});

describe('seed, quality and what they lead to', () => {
  it('says the kg/ha that follow from a seeding rate and reckons by them', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    await user.selectOptions(panel.getByLabelText('Basis, Ostermoor'), 'rate');
    // Until all of it is known, what was reckoned from a flat cost is no longer said.
    expect(panel.getByText(/what Ostermoor is worth stays open/)).toBeTruthy();
    expect(screen.queryByText('+$78/ha')).toBeNull();
    await user.type(panel.getByLabelText('Seed, Ostermoor'), '0.5');
    await user.type(panel.getByLabelText('Plants wanted, Ostermoor'), '85');
    await user.type(panel.getByLabelText('Thousand-kernel weight, Ostermoor'), '235');
    await user.type(panel.getByLabelText('Germination, Ostermoor'), '95');
    await user.type(panel.getByLabelText('Seeds lost before they stand, Ostermoor'), '10');
    // 85 × 235 / (100 × 0.95 × 0.9) = 233.6 kg/ha, at 0.50 is 116.81; 0.4 × 270 − (116.81 − 118) = 109.19.
    expect(panel.getByText(/234 kg\/ha of seed, which is \$116\.81\/ha/)).toBeTruthy();
    expect(screen.getByText('+$109/ha')).toBeTruthy();
  });

  it('takes a figure as it is pasted, with spaces and a decimal comma', async () => {
    const asked = serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const area = panel.getByLabelText('Area');
    await user.clear(area);
    await user.click(area);
    await user.paste('1 250,50');
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    await waitFor(() => expect(asked.some((call) => call.method === 'PUT')).toBe(true));
    expect(asked.find((call) => call.method === 'PUT')?.body).toMatchObject({
      weighUp: { areaHectares: 1250.5 },
    });
  });

  it.each(['0', '-290', '99999999999', 'about 290', ''])(
    'keeps the last figures for a price of “%s”',
    async (typed) => {
      serve(() => Response.json(opened));
      await open();
      const panel = within(await money());
      const user = userEvent.setup();
      const middle = panel.getByLabelText('Middle');
      await user.clear(middle);
      if (typed !== '') await user.type(middle, typed);
      expect(panel.getByText(/Some numbers do not fit/)).toBeTruthy();
      expect(screen.getByText('+$78/ha')).toBeTruthy();
      await user.tab();
      await waitFor(() => expect(middle.getAttribute('aria-invalid')).toBe('true'));
    },
  );

  it('refuses a figure after a pause, not while it is being typed', async () => {
    serve(() => Response.json(opened));
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    const middle = panel.getByLabelText('Middle');
    const wrong = () => panel.queryByText(/low price must not be above the middle/);
    await user.clear(middle);
    await user.type(middle, '29');
    await new Promise((resolve) => setTimeout(resolve, 200));
    expect(wrong()).toBeNull();
    await waitFor(() => expect(wrong()).toBeTruthy());
    await user.type(middle, '5');
    await waitFor(() => expect(wrong()).toBeNull(), { timeout: 300 });
    await user.type(middle, '{Backspace}5');
    await new Promise((resolve) => setTimeout(resolve, 900));
    expect(wrong()).toBeNull();
  });

  it('reckons a premium by how often each variety passes its limit', async () => {
    serve(
      () => Response.json(opened),
      () => ({ weighUp: { ...weighUp, usualYield: 3 }, result: withProtein }),
    );
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    await user.click(panel.getByRole('button', { name: 'Add a rule' }));
    expect(panel.getByText(/In 8 trials 22\.0% on average, ± 0\.8% between fields and seasons/)).toBeTruthy();
    await user.type(panel.getByLabelText('Limit'), '23');
    await user.type(panel.getByLabelText('Premium or discount'), '20');
    await user.click(screen.getByRole('button', { name: /Ostermoor/ }));
    // The mean of 8 trials is itself known by 8 only: 1 / (0.8 √(1 + 1/8)) = 1.18 spreads, 12 of 100; the candidate 50.
    expect(screen.getByText(/Ostermoor can expect \+\$10\.00\/t and Brindle \+\$2\.39\/t/)).toBeTruthy();
    expect(screen.getByText(/at the grower’s usual 3\.0 t\/ha/)).toBeTruthy();
    await user.type(panel.getByLabelText('Protein of Brindle on this farm'), '26');
    expect(screen.getByText(/and Brindle \+\$20\.00\/t/)).toBeTruthy();
    await user.click(panel.getByRole('button', { name: 'Take rule 1 out' }));
    expect(screen.queryByText(/can expect/)).toBeNull();
  });

  it('says the bad season of ten and what it costs on the area', async () => {
    serve(() => Response.json(opened));
    await open();
    await userEvent.setup().click(await screen.findByRole('button', { name: /Ostermoor/ }));
    // t(0.9) on 20 df is 1.325: 78 less 1.325 × 0.2 × 270 is about 6, and the mean price is 5 higher.
    const story = screen.getByText(/In one season of ten it is under/).textContent ?? '';
    expect(story).toMatch(
      /expect \+\$80\/ha on average .* under \+\$[4-9]\/ha, in one of ten over \+\$15\d\/ha/,
    );
    expect(screen.getByText(/Even that bad season costs nothing on 120 ha/)).toBeTruthy();
    expect(screen.getByText(/region’s average over seasons, the chance that it pays is/)).toBeTruthy();
  });
});

describe('the page in bushels and acres', () => {
  it('takes a price per bushel as it is typed, and saves it per tonne', async () => {
    const asked = serve(() => Response.json({ ...opened, weighUp: { ...weighUp, revision: 4 } }));
    await open('?unit=bu-ac');
    const panel = within(await money());
    const middle = panel.getByLabelText<HTMLInputElement>('Middle');
    expect(middle.value).toBe('7.89');
    expect(panel.getByLabelText<HTMLInputElement>('Area').value).toBe('296.53');
    const user = userEvent.setup();
    await user.clear(middle);
    await user.type(middle, '8.25');
    await user.tab();
    expect(middle.value).toBe('8.25');
    await user.click(panel.getByRole('button', { name: 'Save these numbers' }));
    await waitFor(() => expect(asked.some((call) => call.method === 'PUT')).toBe(true));
    const sent = asked.find((call) => call.method === 'PUT');
    const { assumptions, areaHectares } = (
      sent?.body as { weighUp: { assumptions: { priceMiddle: number }; areaHectares: number } }
    ).weighUp;
    // 36.744 bushels of 60 lb are a tonne; what was not typed is what it was.
    expect(assumptions.priceMiddle).toBeCloseTo(8.25 * 36.744, 2);
    expect(assumptions).toMatchObject({ priceLow: 255, priceHigh: 340, haulagePerTonne: 12 });
    expect(areaHectares).toBe(120);
  });

  it('tells a candidate without a tonne or a hectare left in it', async () => {
    serve(() => Response.json(opened));
    await open(`?unit=bu-ac&open=${idOf(2)}`);
    const story = (await screen.findByRole('heading', { name: 'What it is worth' })).closest('li');
    const text = story?.textContent.replaceAll('\u00a0', ' ') ?? '';
    expect(text).toContain('+5.9 bu/ac');
    expect(text).toContain('+$32/ac');
    expect(text).toContain('costs $12/ac more than Brindle');
    expect(text).toContain('on 296.5 ac');
    expect(text).toContain('At $7.89/bu');
    expect(text).not.toMatch(/t\/ha|\$\d+\/t\b|\/ha|hectare|tonne/);
  });

  it('keeps what is typed when it is turned to the table and back', async () => {
    serve(() => Response.json(opened));
    await open();
    const user = userEvent.setup();
    const panel = within(await money());
    const middle = panel.getByLabelText('Middle');
    await user.clear(middle);
    await user.type(middle, '300');
    await user.click(screen.getByRole('button', { name: 'Table view' }));
    // 0.4 × (300 − 12 − 8) − 30 = 82
    expect(screen.getByText('+$82/ha at $300/t')).toBeTruthy();
    expect(screen.getByText(/numbers that are not saved yet/)).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Back to the full page' }));
    expect(within(await money()).getByLabelText('Middle')).toHaveProperty('value', '300');
  });

  it('is turned round and back by key alone: focus goes on from the way back', async () => {
    serve(() => Response.json(opened));
    await open();
    await money();
    const user = userEvent.setup();
    screen.getByRole('button', { name: 'Table view' }).focus();
    await user.keyboard('{Enter}');
    const back = screen.getByRole('button', { name: 'Back to the full page' });
    expect(document.activeElement).toBe(back);
    screen.getByRole('button', { name: /^Ostermoor/ }).focus();
    await user.keyboard('{Escape}');
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Table view' }));
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
    serve(
      () => Response.json(opened),
      () => ({ weighUp, result }),
    );
    await open();
    const said = await screen.findByText(/come from other regions alone \(Upper Velmar\)/);
    const verdict = screen.getByText(/is really ahead of Brindle/);
    expect(said.compareDocumentPosition(verdict) & Node.DOCUMENT_POSITION_FOLLOWING).not.toBe(0);
    expect(screen.getAllByText(/come from other regions alone/)).toHaveLength(1);
  });
});
