import { waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { i18n } from '#src/i18n.ts';
import { money, open, opened, serve, weighUp, withProtein } from '#tests/client/support/served-weigh-up.tsx';

/** How often a sentence was said for one key that was pressed, which is how often what says it was drawn. */
async function countSaid(press: () => Promise<void>): Promise<(key: string) => number> {
  const said = vi.spyOn(i18n, 't');
  await press();
  const keys = said.mock.calls.map(([key]) => [key].flat().map(String).join());
  said.mockRestore();
  return (key) => keys.filter((each) => each.split(':').at(-1) === key).length;
}

describe('what is drawn anew for a figure that is typed', () => {
  async function openTouched() {
    serve(
      () => Response.json(opened),
      () => ({ weighUp, result: withProtein }),
    );
    await open();
    const panel = within(await money());
    const user = userEvent.setup();
    // The first edit unlocks saving and locks the copy, all over the page.
    const middle = panel.getByLabelText('Middle');
    await user.type(middle, '{Backspace}');
    await waitFor(() => expect(panel.getByText(/Some numbers do not fit/)).toBeTruthy());
    return { user, middle };
  }

  it('is the answer once, and nothing on which no price bears', async () => {
    const { user, middle } = await openTouched();
    const said = await countSaid(() => user.type(middle, '5'));
    expect(middle).toHaveProperty('value', '295');
    expect(said('gapTitle')).toBe(1);
    for (const key of ['cautionsTitle', 'traits.title', 'page.ways']) expect(said(key)).toBe(0);
  });

  it('is no other field of the panel', async () => {
    const { user, middle } = await openTouched();
    const said = await countSaid(() => user.type(middle, '5'));
    for (const key of ['money.title', 'money.seeds', 'money.seed', 'money.middle', 'money.moistureLead'])
      expect(said(key)).toBe(0);
    expect(said('money.quality.lead')).toBe(0);
  });

  it('is not the answer where the figure does not fit: the last one stands', async () => {
    const { user, middle } = await openTouched();
    const said = await countSaid(() => user.type(middle, '{Backspace}'));
    expect(middle).toHaveProperty('value', '2');
    expect(said('gapTitle')).toBe(0);
  });
});
