import { useState } from 'react';
import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromReaderPer, toReaderPer, type ReaderUnits } from '#shared/reader-units.ts';
import { Field } from '#src/components/field.tsx';
import { MeasureInput, PriceInput, showConverted } from '#src/components/measure-input.tsx';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

const bushels: ReaderUnits = { yieldUnit: 'bu/ac', bushelWeightLb: 60 };

const kept: { price: number | null; area: number | null } = { price: null, area: null };

function Fields({
  units,
  price: first,
  area: firstArea,
}: {
  units: ReaderUnits;
  price: number;
  area: number;
}) {
  const [price, setPrice] = useState<number | null>(first);
  const [area, setArea] = useState<number | null>(firstArea);
  Object.assign(kept, { price, area });
  return (
    <ReaderUnitsProvider units={units}>
      <Field label="Price">
        <PriceInput currency="CAD" per="t" value={price} onValueChange={setPrice} />
      </Field>
      <Field label="Area">
        <MeasureInput unit="ha" value={area} onValueChange={setArea} />
      </Field>
    </ReaderUnitsProvider>
  );
}

const field = (name: string): HTMLInputElement => screen.getByLabelText(name);

async function retype(name: string, text: string): Promise<void> {
  const user = userEvent.setup();
  await user.clear(field(name));
  await user.type(field(name), text);
  await user.tab();
}

describe('a field in the reader’s units', () => {
  it('shows what is held per tonne as a price per bushel, and leaves it alone while nobody types', async () => {
    await renderClient(<Fields units={bushels} price={290} area={120} />);
    expect(field('Price').value).toBe('7.89');
    expect(field('Area').value).toBe('296.53');
    expect(document.body.textContent).toContain('$/bu');
    const user = userEvent.setup();
    await user.click(field('Price'));
    await user.tab();
    await user.tab();
    expect(kept).toEqual({ price: 290, area: 120 });
  });

  it('gives back what was typed to the last digit', async () => {
    await renderClient(<Fields units={bushels} price={290} area={120} />);
    await retype('Price', '5.25');
    await retype('Area', '160');
    expect([field('Price').value, field('Area').value]).toEqual(['5.25', '160']);
    expect(kept.price).toBeCloseTo(5.25 * 36.744, 2);
    expect(kept.area).toBeCloseTo(64.75, 2);
  });

  it('holds what is typed as it is where the reader reads in tonnes', async () => {
    await renderClient(<Fields units={{ ...bushels, yieldUnit: 'q/ha' }} price={290} area={120} />);
    await retype('Price', '283.123456');
    expect(kept.price).toBe(283.123456);
    expect(field('Price').value).toBe('283.123456');
  });

  it('keeps nothing and text that is no figure for what they are', async () => {
    await renderClient(<Fields units={bushels} price={290} area={120} />);
    await retype('Price', 'dear');
    expect(kept.price).toBeNaN();
    await userEvent.setup().clear(field('Price'));
    expect(kept.price).toBeNull();
  });

  it('does so for every price to the hundredth of a cent', () => {
    const typed = fc.integer({ min: 1, max: 10_000_000 }).map((hundredths) => hundredths / 10_000);
    fc.assert(
      fc.property(typed, fc.integer({ min: 20, max: 80 }), (price, bushelWeightLb) => {
        const units = { ...bushels, bushelWeightLb };
        expect(showConverted(toReaderPer(fromReaderPer(price, 't', units), 't', units))).toBe(price);
      }),
    );
  });
});
