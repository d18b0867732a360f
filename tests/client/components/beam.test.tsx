import { screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { moneyVerdictCode, verdictCode } from '#shared/verdict.ts';
import { MoneyVerdictMark, VerdictMark } from '#src/components/beam.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

// Words and tilts: shared words of the product (its table of verdicts).
const verdicts = [
  ['ahead', 'candidate', 'Really ahead', 'Réellement devant'],
  ['behind', 'current', 'Really behind', 'Réellement derrière'],
  ['level', 'level', 'Neck and neck', 'Au coude à coude'],
  ['open', 'swinging', 'Not settled', 'Pas tranché'],
  ['thin', 'bare', 'Too few trials', 'Trop peu d’essais'],
] as const;

describe('the beam', () => {
  it.each(verdicts)('of %s is %s and stands beside its word', async (verdict, tilt, english, french) => {
    const { container, unmount } = await renderClient(<VerdictMark verdict={verdict} />);
    expect(container.querySelector('svg')?.dataset['tilt']).toBe(tilt);
    expect(screen.getByText(english)).toBeTruthy();
    unmount();
    await renderClient(<VerdictMark verdict={verdict} />, { language: 'fr' });
    expect(screen.getByText(french)).toBeTruthy();
  });

  it('differs in shape from verdict to verdict', async () => {
    const shapes = new Set<string>();
    for (const verdict of verdictCode.options) {
      const { container, unmount } = await renderClient(<VerdictMark verdict={verdict} />);
      shapes.add(container.querySelector('svg')?.innerHTML ?? '');
      unmount();
    }
    expect(shapes.size).toBe(5);
  });

  it('has a word for every verdict on money', async () => {
    const words = new Set<string | null>();
    for (const verdict of moneyVerdictCode.options) {
      const { container, unmount } = await renderClient(<MoneyVerdictMark verdict={verdict} />);
      words.add(container.textContent);
      unmount();
    }
    expect([...words]).toEqual([
      'Pays',
      'Likely pays',
      'Coin toss',
      'Unlikely to pay',
      'Costs you',
      'Can’t say',
    ]);
  });
});
