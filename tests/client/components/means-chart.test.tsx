import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { MeansChart } from '#src/components/means-chart.tsx';
import { scaleOfMeans } from '#src/components/means-scale.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';

const entry = (name: string, mean: number) => ({ entry: name, mean, se: 0.145, letters: 'a' });
const close = [entry('Quill', 4.88), entry('Torrel', 5.45), entry('Tallis', 5.44)];
const apart = [entry('Quill', 3.1), entry('Torrel', 5.45)];

describe('the scale of means', () => {
  it('starts at zero while differences can be read on bars', () => {
    expect(scaleOfMeans(apart, 0.41)).toMatchObject({ low: 0, isFromZero: true });
  });

  it('is cut where bars from zero would look alike, and holds every mean and the LSD', () => {
    const scale = scaleOfMeans(close, 0.9);
    expect(scale.isFromZero).toBe(false);
    expect(scale.low).toBeLessThan(4.88);
    expect(scale.high).toBeGreaterThan(5.45);
    expect(scale.high - scale.low).toBeGreaterThan(0.9);
  });

  it('stands with equal means and without an LSD', () => {
    const scale = scaleOfMeans([entry('A', 5), entry('B', 5)], null);
    expect(scale.low).toBeLessThan(5);
    expect(scale.high).toBeGreaterThan(5);
  });
});

describe('the means chart', () => {
  const chart = (lsd: number | null, hasLetters = false) => (
    <MeansChart
      title="Means"
      means={close}
      unit="t/ha"
      decimals={2}
      lsd={lsd}
      alpha={0.05}
      hasLetters={hasLetters}
    />
  );

  it('says what it shows and lists the means, highest first', async () => {
    await renderClient(chart(0.41));
    expect(screen.getByRole('img').getAttribute('aria-label')).toBe(
      '3 entries, from Torrel with 5.45\u00a0t/ha down to Quill with 4.88\u00a0t/ha.',
    );
    const names = within(screen.getByRole('table')).getAllByRole('rowheader');
    expect(names.map((cell) => cell.textContent)).toEqual(['Torrel', 'Tallis', 'Quill']);
  });

  it('says the LSD once with its level, or that there is none', async () => {
    const { unmount } = await renderClient(chart(0.41));
    expect(screen.getAllByText(/LSD 0\.41 t\/ha \(5%\)/)).toHaveLength(1);
    unmount();
    await renderClient(chart(null));
    expect(screen.getByText(/No LSD for this trial/)).toBeTruthy();
  });

  it('shows letters only where they are asked for', async () => {
    const { unmount } = await renderClient(chart(0.41));
    expect(screen.queryByRole('columnheader', { name: 'Letters' })).toBeNull();
    unmount();
    await renderClient(chart(0.41, true));
    expect(screen.getByRole('columnheader', { name: 'Letters' })).toBeTruthy();
  });
});
