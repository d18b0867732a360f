import { screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useLocation } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { Caution } from '#shared/caution.ts';
import { TableView } from '#src/features/weigh-up/table-view.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { assumptions, buildCandidate, buildGap, idOf } from '#tests/client/support/weigh-up-factory.ts';

const few: Caution = { code: 'few-site-years', severity: 'warning', values: { variety: 'Élan', count: 2 } };
const plots: Caution = { code: 'small-plots', severity: 'note', values: {} };

const ostermoor = buildCandidate();
const elan = buildCandidate({
  varietyId: idOf(3),
  varietyName: 'Élan',
  verdict: 'thin',
  gap: buildGap(0.7, 0.5),
  siteYears: 2,
  cautions: [few],
});

function Address() {
  return <output aria-label="address">{useLocation().search}</output>;
}

const show = (at = '/?view=table', hasUnsaved = false) =>
  renderClient(
    <>
      <TableView
        candidates={[ostermoor, elan]}
        currentName="Brindle"
        money={assumptions}
        cautions={[plots]}
        hasUnsaved={hasUnsaved}
      />
      <input aria-label="somewhere" />
      <Address />
    </>,
    { at, namespaces: ['weigh-up', 'verdicts', 'cautions'] },
  );

/** The article in view; the others stand there for paper. */
function shown(): HTMLElement {
  const articles = screen.getAllByRole('article').filter((article) => !article.className.includes('hidden'));
  expect(articles).toHaveLength(1);
  return articles[0] as HTMLElement;
}
const lines = () =>
  within(shown())
    .getAllByRole('listitem')
    .map((line) => line.textContent.replaceAll('\u00a0', ' '));
const address = () => screen.getByLabelText('address').textContent;

describe('the table view', () => {
  it('says a candidate in three lines: verdict, gap with both intervals named, and worth', async () => {
    await show();
    const [verdict, gap, worth] = lines();
    expect(lines()).toHaveLength(3);
    expect(verdict).toBe('Really ahead');
    expect(shown().querySelector('[data-tilt="candidate"]')).not.toBeNull();
    expect(gap).toContain('+0.40 t/ha against Brindle');
    expect(gap).toContain('Region’s average: +0.20 to +0.60 t/ha (95% interval)');
    expect(gap).toContain('Your own next season: 0.00 to +0.80 t/ha (95% range)');
    expect(worth).toMatch(/^\+\$78\/ha at \$290\/tpays in \d\d of 100 · 14 site-years$/);
  });

  it('claims no interval and no return where the trials are too few', async () => {
    await show(`/?view=table&open=${idOf(3)}`);
    const [verdict, gap, worth] = lines();
    expect(verdict).toBe('Too few trials');
    expect(gap).toContain('too few trials for an interval');
    expect(gap).not.toContain('95%');
    expect(worth).toBe('What it is worth can’t be said2 site-years');
  });

  it('turns by arrow keys and by its large keys, the cautions with it, and Escape leads back', async () => {
    const user = userEvent.setup();
    await show();
    expect(screen.getByText(/1 of 2/)).toBeTruthy();
    await user.keyboard('{ArrowRight}');
    expect(address()).toBe(`?view=table&open=${idOf(3)}`);
    expect(within(shown()).getByRole('heading').textContent).toBe('Élan');
    expect(screen.getAllByRole('status').map((status) => status.textContent)).toContain('2 of 2 Élan');
    const [cautions] = screen.getAllByRole('region', { name: 'Where this evidence stops' });
    expect(cautions?.textContent).toContain('rests on only 2 trials');
    expect(cautions?.textContent).toContain('small plots');
    await user.keyboard('{ArrowRight}');
    expect(screen.getByText(/2 of 2/)).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Previous candidate: Ostermoor' }));
    expect(within(shown()).getByRole('heading').textContent).toBe('Ostermoor');
    await user.keyboard('{Escape}');
    expect(address()).toBe(`?open=${idOf(2)}`);
  });

  it('leaves the arrow keys to a field that is typed in', async () => {
    const user = userEvent.setup();
    await show();
    await user.click(screen.getByLabelText('somewhere'));
    await user.keyboard('{ArrowRight}');
    expect(address()).toBe('?view=table');
  });

  it('has every candidate on paper, and says so when its money is not saved', async () => {
    await show('/?view=table', true);
    const articles = screen.getAllByRole('article');
    expect(articles).toHaveLength(2);
    expect(articles[1]?.className).toContain('print:block');
    expect(screen.getByText(/numbers that are not saved yet/)).toBeTruthy();
  });
});
