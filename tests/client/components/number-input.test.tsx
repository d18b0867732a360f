import { useState } from 'react';
import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it } from 'vitest';
import { Field } from '#src/components/field.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

function PriceField({ onRead }: { onRead: (value: number | null) => void }) {
  const [price, setPrice] = useState<number | null>(290);
  return (
    <Field label="Price" hint="At the farm gate" error={Number.isNaN(price) ? 'Not a figure' : undefined}>
      <NumberInput
        value={price}
        unit="$/t"
        decimals={2}
        onValueChange={(value) => {
          setPrice(value);
          onRead(value);
        }}
      />
    </Field>
  );
}

async function type(text: string, language: 'en' | 'fr') {
  const read: (number | null)[] = [];
  await renderClient(<PriceField onRead={(value) => read.push(value)} />, { language });
  const input = screen.getByLabelText<HTMLInputElement>('Price');
  await userEvent.clear(input);
  await userEvent.type(input, text);
  await userEvent.tab();
  return { input, value: read.at(-1) };
}

describe('the number field', () => {
  it('reads a French decimal and writes it as French does when left', async () => {
    const { input, value } = await type('1 250,5', 'fr');
    expect(value).toBe(1250.5);
    expect(input.value).toBe('1\u202f250,50');
  });

  it('reads English grouping', async () => {
    const { input, value } = await type('1,250.5', 'en');
    expect(value).toBe(1250.5);
    expect(input.value).toBe('1,250.50');
  });

  it('keeps a text that is no figure for correction and ties the error to the field', async () => {
    const { input, value } = await type('29o', 'en');
    expect(value).toBeNaN();
    expect(input.value).toBe('29o');
    expect(input.getAttribute('aria-invalid')).toBe('true');
    const described = (input.getAttribute('aria-describedby') ?? '').split(' ');
    const words = described.map((id) => document.getElementById(id)?.textContent);
    expect(words).toEqual(['At the farm gate', expect.stringContaining('Not a figure'), '$/t']);
  });

  it('is empty, not zero, when cleared', async () => {
    const read: (number | null)[] = [];
    await renderClient(<PriceField onRead={(value) => read.push(value)} />);
    await userEvent.clear(screen.getByLabelText('Price'));
    expect(read).toEqual([null]);
  });
});
