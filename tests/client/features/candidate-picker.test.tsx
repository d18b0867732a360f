import { cleanup, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useLocation, useSearchParams } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import type { Caution } from '#shared/caution.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { readChoice } from '#src/url-state.ts';
import { CandidatePicker } from '#src/features/weigh-up/candidate-picker.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildCandidate, buildGap, idOf } from '#tests/client/support/weigh-up-factory.ts';

const few: Caution = { code: 'few-site-years', severity: 'warning', values: { variety: 'Élan', count: 2 } };
const seed: Caution = { code: 'no-seed-cost', severity: 'note', values: { variety: 'Élan' } };

const ostermoor = buildCandidate({ varietyId: idOf(2), varietyName: 'Ostermoor', siteYears: 9 });
const elan = buildCandidate({
  varietyId: idOf(3),
  varietyName: 'Élan',
  verdict: 'thin',
  gap: buildGap(0.7, 0.5),
  siteYears: 2,
  cautions: [few, seed],
});
const marrasby = buildCandidate({
  varietyId: idOf(4),
  varietyName: 'Marrasby',
  verdict: 'behind',
  gap: buildGap(-0.3, 0.1),
  siteYears: 14,
});
const ungrown = buildCandidate({
  varietyId: idOf(5),
  varietyName: 'Brackwell',
  verdict: 'thin',
  gap: null,
  siteYears: 0,
});
const all = [elan, ostermoor, marrasby, ungrown];

const varieties = all.map(({ varietyId: id, varietyName: name }) => ({
  ...{ id, name, isCheck: false, firstSeason: null },
  aliases: name === 'Marrasby' ? ['MB-17'] : [],
}));

function Page({ candidates }: { candidates: readonly CandidateResult[] }) {
  const [search] = useSearchParams();
  const chosenIds = (search.get('candidates') ?? '').split(',').filter((id) => id !== '');
  return (
    <>
      <CandidatePicker
        candidates={candidates}
        kind={readChoice(search, 'question', ['several', 'best'])}
        chosenIds={chosenIds}
        currentName="Brindle"
        varieties={varieties}
      />
      <output aria-label="address">{decodeURIComponent(useLocation().search)}</output>
    </>
  );
}

const show = (at = '/', candidates: readonly CandidateResult[] = all) =>
  renderClient(<Page candidates={candidates} />, {
    at,
    namespaces: ['weigh-up', 'verdicts', 'cautions', 'drawings'],
  });

const names = () =>
  screen
    .getAllByRole('rowheader')
    .map((cell) => within(cell).getByRole('checkbox').closest('label')?.textContent);
const heading = (name: string) => screen.getByRole('columnheader', { name: new RegExp(`^${name}`) });
const kept = () => screen.getAllByRole('listitem').map((item) => item.textContent);
const address = () => screen.getByLabelText('address').textContent;

describe('the list of candidates', () => {
  it('stands as the server orders it, each gap with its interval, none of them where trials are too few', async () => {
    await show();
    expect(names()).toEqual(['Élan', 'Ostermoor', 'Marrasby', 'Brackwell']);
    const row = screen.getByRole('row', { name: /Ostermoor/ });
    expect(row.textContent.replaceAll('\u00a0', ' ')).toContain('+0.40 t/ha+0.20 to +0.60 t/ha');
    expect(screen.getByRole('row', { name: /Élan/ }).textContent).not.toContain(' to ');
    expect(screen.getByText(/Under each gap stands its 95% interval/)).toBeTruthy();
  });

  it('says over what the next page compares: the best of the list over the whole of it', async () => {
    await show();
    expect(
      screen.getByText(/The verdicts on the next page are for the candidates that you keep/),
    ).toBeTruthy();
    cleanup();
    await show('/?question=best');
    expect(screen.getByText(/On the next page, too, yield is compared over this whole list/)).toBeTruthy();
    expect(screen.queryByText(/verdicts on the next page/)).toBeNull();
  });

  it('is sorted by every column from the keyboard, both ways, what has no figure last', async () => {
    const user = userEvent.setup();
    await show();
    const gap = within(heading('Gap')).getByRole('button');
    gap.focus();
    await user.keyboard('{Enter}');
    expect(heading('Gap').getAttribute('aria-sort')).toBe('descending');
    expect(names()).toEqual(['Élan', 'Ostermoor', 'Marrasby', 'Brackwell']);
    await user.keyboard(' ');
    expect(heading('Gap').getAttribute('aria-sort')).toBe('ascending');
    expect(names()).toEqual(['Marrasby', 'Ostermoor', 'Élan', 'Brackwell']);
    const expected = {
      Candidate: ['Brackwell', 'Élan', 'Marrasby', 'Ostermoor'],
      Verdict: ['Ostermoor', 'Marrasby', 'Élan', 'Brackwell'],
      'Site-years': ['Marrasby', 'Ostermoor', 'Élan', 'Brackwell'],
      // Only of Ostermoor are there both a seed cost and trials enough.
      'Pays in': ['Ostermoor', 'Élan', 'Marrasby', 'Brackwell'],
      Cautions: ['Élan', 'Ostermoor', 'Marrasby', 'Brackwell'],
    };
    for (const [column, order] of Object.entries(expected)) {
      await user.click(within(heading(column)).getByRole('button'));
      expect(names()).toEqual(order);
      expect(heading(column).getAttribute('aria-sort')).not.toBe('none');
    }
    expect(heading('Gap').getAttribute('aria-sort')).toBe('none');
  });

  it('is searched by name without its accents, by alias and by verdict', async () => {
    const user = userEvent.setup();
    await show();
    const box = screen.getByRole('searchbox', { name: 'Search candidates' });
    await user.type(box, 'elan');
    expect(names()).toEqual(['Élan']);
    expect(screen.getByText('1 of 4 candidates')).toBeTruthy();
    await user.clear(box);
    await user.type(box, 'mb-17');
    expect(names()).toEqual(['Marrasby']);
    await user.clear(box);
    await user.type(box, 'really');
    expect(names()).toEqual(['Ostermoor', 'Marrasby']);
    await user.type(box, ' nobody');
    expect(screen.queryAllByRole('rowheader')).toEqual([]);
    await user.click(screen.getByRole('button', { name: 'Show all' }));
    expect(names()).toHaveLength(4);
  });

  it('says the cautions of a line in words when it is opened', async () => {
    const user = userEvent.setup();
    await show();
    const open = screen.getByRole('button', { name: /^2 cautions Élan/ });
    expect(open.getAttribute('aria-expanded')).toBe('false');
    await user.click(open);
    expect(open.getAttribute('aria-expanded')).toBe('true');
    const words = document.getElementById(open.getAttribute('aria-controls') ?? '');
    expect(words?.textContent).toContain('Warning: Élan rests on only 2 trials here.');
    expect(words?.textContent).toContain('Note: There is no seed cost for Élan');
    await user.click(open);
    expect(screen.queryByText(/rests on only 2 trials/)).toBeNull();
  });
});

describe('the candidates that are kept', () => {
  it('stand in the order in which they were ticked, in the address too', async () => {
    const user = userEvent.setup();
    await show();
    expect(screen.getByText(/None kept yet/)).toBeTruthy();
    await user.click(screen.getByRole('checkbox', { name: 'Marrasby' }));
    await user.click(screen.getByRole('checkbox', { name: 'Élan' }));
    expect(address()).toBe(`?candidates=${idOf(4)},${idOf(3)}`);
    expect(kept()[0]).toContain('Marrasby');
    await user.click(screen.getByRole('checkbox', { name: 'Marrasby' }));
    expect(address()).toBe(`?candidates=${idOf(3)}`);
  });

  it('are moved by the keyboard, and the focus goes with what moves', async () => {
    const user = userEvent.setup();
    await show(`/?candidates=${[2, 3, 4].map(idOf).join(',')}`);
    const up = () => screen.getByRole('button', { name: 'Move Marrasby up' });
    up().focus();
    await user.keyboard('{Enter}');
    expect(address()).toBe(`?candidates=${[2, 4, 3].map(idOf).join(',')}`);
    expect(document.activeElement).toBe(up());
    await user.keyboard('{Enter}');
    expect(document.activeElement).toBe(up());
    expect(up().getAttribute('aria-disabled')).toBe('true');
    await user.keyboard('{Enter}');
    expect(address()).toBe(`?candidates=${[4, 2, 3].map(idOf).join(',')}`);
    await user.click(screen.getByRole('button', { name: 'Move Marrasby down' }));
    await user.click(screen.getByRole('button', { name: 'Take Ostermoor out' }));
    expect(address()).toBe(`?candidates=${[4, 3].map(idOf).join(',')}`);
  });

  it('stay in view while another name is searched for', async () => {
    const user = userEvent.setup();
    await show(`/?candidates=${idOf(2)}`);
    await user.type(screen.getByRole('searchbox'), 'elan');
    expect(kept()[0]).toContain('Ostermoor');
  });

  it('are eight at most', async () => {
    const many = Array.from({ length: 9 }, (_, i) =>
      buildCandidate({ varietyId: idOf(20 + i), varietyName: `Entry ${i}` }),
    );
    const first = many.slice(0, 8).map(({ varietyId }) => varietyId);
    await show(`/?candidates=${first.join(',')}`, many);
    expect(screen.getByText(/Eight candidates at most/)).toBeTruthy();
    expect(screen.getByRole('checkbox', { name: 'Entry 8' })).toHaveProperty('disabled', true);
    expect(screen.getByRole('checkbox', { name: 'Entry 7' })).toHaveProperty('disabled', false);
  });
});
