import { screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { FoldedSection, SectionLink } from '#src/components/folded-section.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';

const page = (
  <>
    <SectionLink id="farm">To the farm</SectionLink>
    <FoldedSection id="farm" title="The farm">
      <p>Fields</p>
    </FoldedSection>
  </>
);

/** A screen as wide as a desktop's, or a phone's. */
function stubScreen(isRoomy: boolean): void {
  vi.stubGlobal('matchMedia', () => ({ matches: isRoomy }));
}

const isOpen = () => screen.getByRole('region', { name: 'The farm' }).querySelector('details')?.open;

describe('a folded section', () => {
  it('is open where there is room, and a line under its heading on a phone', async () => {
    stubScreen(true);
    const wide = await renderClient(page);
    expect(isOpen()).toBe(true);
    wide.unmount();
    stubScreen(false);
    await renderClient(page);
    expect(isOpen()).toBe(false);
    expect(screen.getByRole('heading', { level: 2, name: 'The farm' })).toBeTruthy();
  });

  it('is opened by the address that names it', async () => {
    stubScreen(false);
    await renderClient(page, { at: '/#farm' });
    expect(isOpen()).toBe(true);
  });

  it('is opened by a link to it, again after it was closed', async () => {
    stubScreen(false);
    const user = userEvent.setup();
    await renderClient(page);
    await user.click(screen.getByRole('link', { name: 'To the farm' }));
    expect(isOpen()).toBe(true);
    await user.click(screen.getByRole('heading', { name: 'The farm' }));
    expect(isOpen()).toBe(false);
    await user.click(screen.getByRole('link', { name: 'To the farm' }));
    expect(isOpen()).toBe(true);
  });
});
