import { useState } from 'react';
import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it } from 'vitest';
import type { WeighUp } from '#shared/weigh-up.ts';
import { FigureField } from '#src/features/weigh-up/money-fields.tsx';
import { useMoneyForm } from '#src/features/weigh-up/use-money-form.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { buildWeighUp } from '#tests/client/support/weigh-up-factory.ts';

const crop = { traits: [], standardMoisturePercent: 16 };

function Panel({ weighUp }: { weighUp: WeighUp }) {
  const { form, base, areaHectares, take } = useMoneyForm(weighUp, crop);
  return (
    <>
      <FigureField form={form} name="areaHectares" label="Area" measure="ha" />
      <p>{`reckoned on ${areaHectares}, typed over ${base.revision}`}</p>
      <button type="button" onClick={() => take(base)}>
        reset
      </button>
    </>
  );
}

/** A page that one leaves for another of the product, and comes back to. */
function Visit({ later }: { later: WeighUp }) {
  const [stay, setStay] = useState(0);
  return (
    <>
      {stay % 2 === 0 && <Panel weighUp={stay === 0 ? buildWeighUp() : later} />}
      <button type="button" onClick={() => setStay(stay + 1)}>
        go
      </button>
    </>
  );
}

const press = (name: string) => userEvent.click(screen.getByRole('button', { name }));
const area = () => screen.getByLabelText('Area');
const isLeavingAsked = () => !window.dispatchEvent(new Event('beforeunload', { cancelable: true }));

async function typeAndComeBack(later = buildWeighUp()): Promise<void> {
  await renderClient(<Visit later={later} />, { namespaces: ['weigh-up', 'errors'] });
  await userEvent.clear(area());
  await userEvent.type(area(), '80');
  await press('go');
  await press('go');
}

describe('numbers that were typed and not saved', () => {
  it('are there again when one comes back from another page', async () => {
    await typeAndComeBack();
    expect(area()).toHaveProperty('value', '80');
    expect(screen.getByText('reckoned on 80, typed over 3')).toBeTruthy();
  });

  it('stay typed over what they were typed over, so that saving meets what was saved meanwhile', async () => {
    await typeAndComeBack(buildWeighUp({ revision: 4, areaHectares: 60 }));
    expect(screen.getByText('reckoned on 80, typed over 3')).toBeTruthy();
  });

  it('are gone once they were reset', async () => {
    await typeAndComeBack();
    await press('reset');
    expect(area()).toHaveProperty('value', '120');
    await press('go');
    await press('go');
    expect(area()).toHaveProperty('value', '120');
  });

  it('are asked about before the tab is closed, and nothing else is', async () => {
    await renderClient(<Panel weighUp={buildWeighUp()} />);
    expect(isLeavingAsked()).toBe(false);
    await userEvent.type(area(), '5');
    expect(isLeavingAsked()).toBe(true);
    await press('reset');
    expect(isLeavingAsked()).toBe(false);
  });
});
