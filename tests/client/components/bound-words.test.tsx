import { describe, expect, it } from 'vitest';
import { BoundWords } from '#src/components/bound-words.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

async function listBound(text: string) {
  const { container } = await renderClient(<BoundWords text={text} />);
  expect(container.textContent).toBe(text);
  return [...container.querySelectorAll('span')].map((span) => span.textContent);
}

describe('the words of a heading', () => {
  it('keep a name whole at its hyphen, and read as they are written', async () => {
    expect(await listBound('Orge de printemps, Haut-Velmar : par rapport à Val-d’Or')).toEqual([
      'Haut-Velmar',
      'Val-d’Or',
    ]);
  });

  it('let a name break that a phone could not hold, and leave signs alone', async () => {
    expect(await listBound('Saint-Jean-sur-Richelieu 2022-2026 - essai −5')).toEqual([]);
  });
});
