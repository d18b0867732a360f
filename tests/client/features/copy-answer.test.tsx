import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { hydrateRoot } from 'react-dom/client';
import { renderToString } from 'react-dom/server';
import { afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { weighMoney } from '#shared/partial-budget.ts';
import { CopyAnswer, type CopyAnswerProps } from '#src/features/grower-copy/copy-answer.tsx';
import { withPrice, withSeed } from '#src/features/grower-copy/own-assumptions.ts';
import { carryOwnNumbers } from '#src/features/grower-copy/own-numbers-fragment.ts';
import enCopy from '#locales/en/copy.json' with { type: 'json' };
import frCopy from '#locales/fr/copy.json' with { type: 'json' };
import { i18n } from '#src/i18n.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';
import {
  assumptions,
  buildCandidate,
  buildWeighUp,
  basis,
  idOf,
} from '#tests/client/support/weigh-up-factory.ts';

const answer: CopyAnswerProps = {
  weighUp: buildWeighUp(),
  basis,
  candidates: [
    buildCandidate(),
    buildCandidate({ varietyId: idOf(3), varietyName: 'Tallis', verdict: 'open' }),
    buildCandidate({ varietyId: idOf(4), varietyName: 'Unpriced' }),
  ],
  practicalMargin: 0.1,
  best: null,
};

const namespaces = ['common', 'copy', 'drawings', 'verdicts'] as const;
// The application does not bring the sentences of copies along.
beforeAll(() => {
  i18n.addResourceBundle('en', 'copy', enCopy);
  i18n.addResourceBundle('fr', 'copy', frCopy);
});
const open = (language: 'en' | 'fr' = 'en') =>
  renderClient(<CopyAnswer {...answer} />, { language, namespaces: [...namespaces] });

const priceField = () => screen.getByRole('textbox', { name: 'Your price' });
const articleOf = (name: string) => {
  const article = screen.getByRole('heading', { level: 2, name }).closest('article');
  if (article === null) throw new Error(`no part of the page is about ${name}`);
  return within(article);
};
const breakEvenAt = (name: string) =>
  articleOf(name).getByRole('img').querySelector('[data-mark="break-even"]')?.getAttribute('x1');

async function typePrice(text: string): Promise<void> {
  await userEvent.clear(priceField());
  await userEvent.type(priceField(), text);
}

const seedField = (name: string) => screen.getByRole('textbox', { name: `Seed of ${name}` });

async function typeSeed(name: string, text: string): Promise<void> {
  await userEvent.clear(seedField(name));
  await userEvent.type(seedField(name), text);
}

beforeEach(() => history.replaceState(null, '', '/copy/secret?lang=en'));
afterEach(() => history.replaceState(null, '', '/'));

describe('the answer of a copy', () => {
  it('shows the frozen figures first, unmarked', async () => {
    await open();
    expect(screen.queryByText(/^Your own number/)).toBeNull();
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
    expect(priceField()).toHaveProperty('value', '290');
    expect(
      articleOf('Unpriced').getAllByText('What it is worth cannot be said: a seed cost is missing.'),
    ).not.toEqual([]);
  });

  it('reckons return, chance and break-even anew with an own price, and says whose they are', async () => {
    await open();
    const frozenLine = breakEvenAt('Ostermoor');
    await typePrice('180');
    const money = weighMoney(buildCandidate(), basis, withPrice(assumptions, 180));
    expect(Math.round(money?.returnPerHectare ?? 0)).toBe(34);
    expect(screen.getByText(/^Your own number: \$180\/t instead of \$290\/t\./)).toBeDefined();
    const ostermoor = articleOf('Ostermoor');
    expect(ostermoor.getByText(/^\+\$34\/ha/).textContent).toContain('own number');
    expect(ostermoor.getByText(/^At \$180\/t that is \+\$34\/ha, \+\$4,080 on 120/)).toBeDefined();
    expect(breakEvenAt('Ostermoor')).not.toBe(frozenLine);
  });

  it('says a price with cents to the cent, wherever it stands', async () => {
    await open();
    await typePrice('310.5');
    const text = () => document.body.textContent ?? '';
    // The mark over the answer, the lines of two candidates, and their stories, which follow a moment later.
    await waitFor(() => expect(text().match(/\$310\.50\/t/g)?.length).toBeGreaterThan(2));
    expect(text()).not.toMatch(/\$31[01]\/t/);
  });

  it('goes back to the price of the copy', async () => {
    await open();
    await typePrice('180');
    await userEvent.click(
      screen.getAllByRole('button', { name: 'Back to the numbers of this copy' })[0] as HTMLElement,
    );
    expect(screen.queryByText(/^Your own number/)).toBeNull();
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
    expect(location.hash).toBe('');
  });

  it.each([
    ['nothing', ' ', 'Please enter the price as a figure.'],
    ['no figure', 'abc', 'Please enter the price as a figure.'],
    [
      'less than it costs to bring it away',
      '19',
      'This price does not cover haulage, harvest and drying, and what quality may take off ($20/t).',
    ],
    [
      'zero',
      '0',
      'This price does not cover haulage, harvest and drying, and what quality may take off ($20/t).',
    ],
    [
      'more than ten times the frozen one',
      '2901',
      'This is more than ten times the price in this copy. Please check the figure.',
    ],
  ])('keeps the frozen figures while the price is %s', async (_case, typed, message) => {
    await open();
    await typePrice(typed);
    expect(screen.getByText(message)).toBeDefined();
    expect(priceField().getAttribute('aria-invalid')).toBe('true');
    expect(screen.queryByText(/^Your own number/)).toBeNull();
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
  });

  it('keeps the frozen figures while seed costs more than 50 tonnes of the crop would sell for', async () => {
    await open();
    await typeSeed('Ostermoor', '999999');
    // 50 × 290
    expect(
      screen.getByText(/^No seed costs more than 50 tonnes of the crop would sell for, here \$14,500\/ha\./),
    ).toBeDefined();
    expect(seedField('Ostermoor').getAttribute('aria-invalid')).toBe('true');
    expect(screen.queryByText(/^Your own number/)).toBeNull();
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
  });

  it('keeps the price in the fragment, which no server is sent, and gives it to a link in another language', async () => {
    await open();
    await typePrice('251.5');
    expect(location.href).toMatch(/\/copy\/secret\?lang=en#price=251\.5$/);
    const link = document.createElement('a');
    link.href = '/copy/secret?lang=fr';
    carryOwnNumbers(link);
    expect(link.href).toMatch(/\?lang=fr#price=251\.5$/);
  });

  it('reckons with an own cost of seed as with an own price, and says which it replaces', async () => {
    await open();
    await userEvent.click(screen.getByText('Your cost of seed'));
    await typeSeed('Ostermoor', '120');
    const own = withSeed(assumptions, idOf(2), 120);
    const money = weighMoney(buildCandidate(), basis, own);
    // By hand: 0.4 × (290 − 20) − (120 − 118).
    expect(Math.round(money?.returnPerHectare ?? NaN)).toBe(106);
    expect(articleOf('Ostermoor').getByText(/^\+\$106\/ha/).textContent).toContain('own number');
    expect(screen.getByText(/^Your own number: seed of Ostermoor at \$120\/ha instead of /)).toBeDefined();
    expect(location.hash).toBe('#seed1=120');
    // Dearer seed of the current variety speaks for every candidate.
    await typeSeed(answer.weighUp.currentVarietyName, '140');
    const both = weighMoney(buildCandidate(), basis, withSeed(own, basis.currentVarietyId, 140));
    expect(both?.returnPerHectare ?? NaN).toBeGreaterThan(money?.returnPerHectare ?? NaN);
    expect(location.hash).toBe('#seed1=120&seed0=140');
    await userEvent.click(
      screen.getAllByRole('button', { name: 'Back to the numbers of this copy' })[0] as HTMLElement,
    );
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
    expect(screen.getByText('These are the numbers of this copy.')).toBeDefined();
    expect(location.hash).toBe('');
  });

  it('lets a reader who knows it fill in a cost of seed that the copy does not know', async () => {
    await open();
    await userEvent.click(screen.getByText('Your cost of seed'));
    const unpriced = () => articleOf('Unpriced').queryAllByText(/a seed cost is missing/).length;
    expect(unpriced()).toBeGreaterThan(0);
    await typeSeed('Unpriced', '70');
    expect(unpriced()).toBe(0);
    expect(
      screen.getByText('Your own number: seed of Unpriced at $70/ha, which this copy does not know.'),
    ).toBeDefined();
  });

  it.each([
    ['no figure', 'abc'],
    ['a negative one', '-5'],
  ])('keeps the frozen figures while a cost of seed is %s', async (_case, typed) => {
    await open();
    await userEvent.click(screen.getByText('Your cost of seed'));
    await typeSeed('Ostermoor', typed);
    expect(seedField('Ostermoor').getAttribute('aria-invalid')).toBe('true');
    expect(screen.queryByText(/^Your own number/)).toBeNull();
    expect(articleOf('Ostermoor').getByText('+$78/ha')).toBeDefined();
    expect(location.hash).toBe('');
  });

  it('takes up the numbers of its address that can be, and no others', async () => {
    history.replaceState(null, '', '/copy/secret?lang=en#price=-3&seed1=95&seed0=x&seed99=4&other=1');
    await open();
    expect(screen.getAllByText(/^Your own number/)).toHaveLength(1);
    expect(screen.getByText(/^Your own number: seed of Ostermoor at \$95\/ha/)).toBeDefined();
  });

  it('takes up the price of its address', async () => {
    history.replaceState(null, '', '/copy/secret?lang=fr#price=180');
    await open('fr');
    expect(screen.getByText(/^Votre chiffre.*180/)).toBeDefined();
  });

  it('takes over what the server rendered, and opens the field only then', async () => {
    const { unmount } = await open();
    unmount();
    const server = document.createElement('div');
    server.innerHTML = renderToString(<CopyAnswer {...answer} />);
    document.body.append(server);
    expect(server.querySelector('fieldset')?.disabled).toBe(true);
    const refused: unknown[] = [];
    const root = hydrateRoot(server, <CopyAnswer {...answer} />, {
      onRecoverableError: (error) => refused.push(error),
    });
    await expect.poll(() => server.querySelector('fieldset')?.disabled).toBe(false);
    expect(refused).toEqual([]);
    root.unmount();
    server.remove();
  });
});
