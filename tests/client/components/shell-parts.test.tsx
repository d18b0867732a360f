import { act, fireEvent, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { Link, Route, Routes } from 'react-router-dom';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { AppShell } from '#src/components/app-shell.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { ErrorBoundary } from '#src/components/error-boundary.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { UrlTabs, useUrlTab } from '#src/components/url-tabs.tsx';
import { changeLanguage } from '#src/i18n.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';

afterEach(() => {
  vi.restoreAllMocks();
  vi.useRealTimers();
});

describe('the head of a page', () => {
  const pages = (
    <Routes>
      <Route
        path="/one"
        element={
          <>
            <PageHeading title="One" />
            <Link to="/one?tab=b">{'same page'}</Link>
            <Link to="/two">{'next page'}</Link>
          </>
        }
      />
      <Route path="/two" element={<PageHeading title="Two" />} />
    </Routes>
  );

  it('takes the focus and names the document after a navigation, not on arrival', async () => {
    await renderClient(pages, { at: '/one' });
    expect(document.title).toBe('One · Gavelrow');
    expect(document.activeElement).toBe(document.body);
    await userEvent.click(screen.getByText('next page'));
    expect(document.activeElement).toBe(screen.getByRole('heading', { level: 1, name: 'Two' }));
    expect(document.title).toBe('Two · Gavelrow');
  });

  it('leaves the focus where it is when only a parameter changes', async () => {
    await renderClient(pages, { at: '/one' });
    const link = screen.getByText('same page');
    await userEvent.click(link);
    expect(document.activeElement).toBe(link);
  });
});

describe('tabs by address', () => {
  const tabs = [
    { id: 'field', label: 'Field' },
    { id: 'history', label: 'History' },
  ];
  function Page() {
    return (
      <>
        <UrlTabs label="Parts" tabs={tabs} />
        <output>{useUrlTab(tabs)}</output>
      </>
    );
  }

  it('follow the address, keep its other parameters and mark the open one', async () => {
    await renderClient(<Page />, { at: '/trial?trait=protein' });
    expect(screen.getByRole('status').textContent).toBe('field');
    await userEvent.click(screen.getByRole('link', { name: 'History' }));
    expect(screen.getByRole('status').textContent).toBe('history');
    const history = screen.getByRole('link', { name: 'History' });
    expect(history.getAttribute('aria-current')).toBe('page');
    expect(history.getAttribute('href')).toBe('/trial?trait=protein&tab=history');
    expect(screen.getByRole('link', { name: 'Field' }).getAttribute('href')).toBe('/trial?trait=protein');
  });

  it('open the first where the address names an unknown one', async () => {
    await renderClient(<Page />, { at: '/trial?tab=nonsense' });
    expect(screen.getByRole('status').textContent).toBe('field');
  });
});

describe('cautions', () => {
  it('stand gravest first, each with its word', async () => {
    await renderClient(
      <CautionList
        title="Where this evidence stops"
        items={[
          { id: 'a', severity: 'note', text: 'several compared' },
          { id: 'b', severity: 'stop', text: 'no trial here' },
          { id: 'c', severity: 'warning', text: 'hail' },
        ]}
      />,
      { language: 'fr' },
    );
    const list = screen.getByRole('region', { name: 'Where this evidence stops' });
    expect(
      within(list)
        .getAllByRole('listitem')
        .map((item) => item.textContent),
    ).toEqual(['Arrêt\u202f: no trial here', 'Attention\u202f: hail', 'Note\u202f: several compared']);
  });
});

describe('a part that breaks', () => {
  function Fragile({ isBroken }: { isBroken: boolean }) {
    if (isBroken) throw new Error('broken');
    return <p>{'whole'}</p>;
  }
  const guarded = (isBroken: boolean, page: string) => (
    <ErrorBoundary resetKey={page} fallback={() => <p>{'sorry'}</p>}>
      <Fragile isBroken={isBroken} />
    </ErrorBoundary>
  );

  it('is replaced, and gets a new try on another page', async () => {
    // React reports what the boundary caught.
    vi.spyOn(console, 'error').mockImplementation(() => undefined);
    const { rerender } = await renderClient(guarded(true, '/one'));
    expect(screen.getByText('sorry')).toBeTruthy();
    rerender(guarded(false, '/one'));
    expect(screen.getByText('sorry')).toBeTruthy();
    rerender(guarded(false, '/two'));
    expect(screen.getByText('whole')).toBeTruthy();
  });
});

describe('the skeleton', () => {
  it('leaves the place empty for the first 200 ms, then says that it loads', async () => {
    await renderClient(null);
    vi.useFakeTimers();
    render(<Skeleton />);
    await act(() => vi.advanceTimersByTimeAsync(199));
    expect(screen.queryByText('Loading…')).toBeNull();
    await act(() => vi.advanceTimersByTimeAsync(1));
    expect(screen.getByText('Loading…')).toBeTruthy();
  });
});

describe('the shell', () => {
  const shell = (
    <AppShell homePath="/" navItems={[{ to: '/trials', label: 'Trials' }]} onLanguage={() => undefined}>
      <p>{'page'}</p>
    </AppShell>
  );

  it('starts with a way past the head and marks the open way', async () => {
    await renderClient(shell, { at: '/trials/7' });
    await userEvent.tab();
    expect(document.activeElement).toBe(screen.getByRole('link', { name: 'Skip to the page' }));
    expect(document.querySelector(document.activeElement?.getAttribute('href') ?? '')?.tagName).toBe('MAIN');
    expect(screen.getByRole('link', { name: 'Trials' }).getAttribute('aria-current')).toBe('page');
  });

  it('offers the other language in its own words', async () => {
    await renderClient(shell, { language: 'fr' });
    expect(screen.getByRole('button', { name: 'English' }).lang).toBe('en');
    expect(screen.queryByRole('button', { name: 'Français' })).toBeNull();
  });

  it('keeps the focus on the switch when the language changes', async () => {
    await renderClient(
      <AppShell homePath="/" navItems={[]} onLanguage={(language) => void changeLanguage(language)}>
        <p>{'page'}</p>
      </AppShell>,
    );
    await userEvent.click(screen.getByRole('button', { name: 'Français' }));
    expect(document.activeElement).toBe(await screen.findByRole('button', { name: 'English' }));
  });

  it('says when the network is gone', async () => {
    await renderClient(shell);
    vi.spyOn(navigator, 'onLine', 'get').mockReturnValue(false);
    act(() => {
      window.dispatchEvent(new Event('offline'));
    });
    expect(screen.getByText(/No network/)).toBeTruthy();
  });

  it('tells what was done and takes it back on request', async () => {
    await renderClient(shell);
    const undo = vi.fn();
    act(() => showToast('Candidate removed', undo));
    expect(screen.getByText('Candidate removed')).toBeTruthy();
    await userEvent.click(screen.getByRole('button', { name: 'Undo' }));
    expect(undo).toHaveBeenCalledOnce();
    await waitFor(() => expect(screen.queryByText('Candidate removed')).toBeNull());
  });

  it('takes away by itself what needs no answer, but not under the pointer, nor what can be undone', async () => {
    await renderClient(shell);
    vi.useFakeTimers();
    try {
      const wait = (ms: number) =>
        act(() => {
          vi.advanceTimersByTime(ms);
        });
      const toastOf = (text: string) => screen.getByText(text).parentElement ?? document.body;
      act(() => showToast('Numbers saved'));
      wait(7000);
      fireEvent.mouseEnter(toastOf('Numbers saved'));
      wait(60_000);
      expect(screen.getByText('Numbers saved')).toBeTruthy();
      fireEvent.mouseLeave(toastOf('Numbers saved'));
      wait(7900);
      expect(screen.getByText('Numbers saved')).toBeTruthy();
      wait(200);
      expect(screen.queryByText('Numbers saved')).toBeNull();
      act(() => showToast('Candidate removed', () => undefined));
      wait(600_000);
      fireEvent.click(screen.getByRole('button', { name: 'Close' }));
      expect(screen.queryByText('Candidate removed')).toBeNull();
    } finally {
      vi.useRealTimers();
    }
  });
});
