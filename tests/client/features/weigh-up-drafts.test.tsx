import { zodResolver } from '@hookform/resolvers/zod';
import { act, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState, type ReactNode } from 'react';
import { useForm } from 'react-hook-form';
import { useLocation } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import type { DraftContent, WeighUpDraft } from '#shared/weigh-up-draft.ts';
import { DraftList } from '#src/features/weigh-up/draft-list.tsx';
import { toFormDraft, useDraftSaving } from '#src/features/weigh-up/draft-saving.ts';
import { FarmFields } from '#src/features/weigh-up/farm-fields.tsx';
import {
  newWeighUpForm,
  type NewWeighUpDraft,
  type NewWeighUpForm,
} from '#src/features/weigh-up/new-weigh-up-form.ts';
import { useSignOut } from '#src/session.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { idOf } from '#tests/client/support/weigh-up-factory.ts';

const content: DraftContent = {
  question: 'crop=pea&region=north',
  growerName: 'Ada',
  farmName: '',
  areaHectares: null,
  usualYield: null,
  priceLow: null,
  priceMiddle: null,
  priceHigh: null,
};
const draft: WeighUpDraft = {
  id: idOf(5),
  revision: 1,
  updatedAt: '2026-12-01T09:00:00.000Z',
  content,
};

type Asked = [method: string, path: string, body: Record<string, unknown> | null];

/** Keeps one draft as the server does. */
function serve(): Asked[] {
  const asked: Asked[] = [];
  let held: WeighUpDraft | null = draft;
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const method = init.method ?? 'GET';
    if (method === 'GET') return Promise.resolve(Response.json({ drafts: held === null ? [] : [held] }));
    asked.push([method, path, init.body === undefined ? null : JSON.parse(String(init.body))]);
    if (method === 'DELETE') held = null;
    return Promise.resolve(Response.json(method === 'DELETE' ? {} : { draft: { ...draft, revision: 2 } }));
  });
  return asked;
}

/** Answers the beginning of a draft only when it is told to. */
function serveSlowly(): { asked: Asked[]; answer: () => void } {
  const asked: Asked[] = [];
  let answer = () => {};
  const reply = new Promise<Response>((resolve) => {
    answer = () => resolve(Response.json({ draft }));
  });
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    if (init.method !== 'POST') return Promise.resolve(Response.json({ drafts: [] }));
    asked.push([init.method, path, JSON.parse(String(init.body))]);
    return reply;
  });
  return { asked, answer: () => answer() };
}

function Typing({ opened }: { opened?: WeighUpDraft }) {
  const form = useForm<NewWeighUpDraft, unknown, NewWeighUpForm>({
    resolver: zodResolver(newWeighUpForm),
    defaultValues: toFormDraft(opened?.content),
  });
  const kept = useDraftSaving(form, opened);
  const [stoppedAt, setStoppedAt] = useState('');
  return (
    <>
      <FarmFields form={form} />
      <output aria-label="kept">{String(kept.isKept)}</output>
      <button type="button" onClick={() => void kept.stop().then((id) => setStoppedAt(id ?? 'none'))}>
        stop
      </button>
      <button type="button" onClick={kept.goOn}>
        go on
      </button>
      <output aria-label="stopped at">{stoppedAt}</output>
      <output aria-label="address">{useLocation().search}</output>
    </>
  );
}

function SignOut() {
  const signOut = useSignOut();
  return (
    <button type="button" onClick={signOut}>
      leave
    </button>
  );
}

const options = { at: '/weigh-ups/new?crop=pea', namespaces: ['weigh-up', 'record', 'errors'] as const };
const render = (part: ReactNode) =>
  renderClient(part, { at: options.at, namespaces: [...options.namespaces] });

describe('a draft', () => {
  it('is begun a while after the last edit, once, and named in the address', async () => {
    const asked = serve();
    const user = userEvent.setup();
    await render(<Typing />);
    // One edit, whole: typed letter by letter, a slow machine could pause in between as a person does.
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    expect(asked).toEqual([]);
    await waitFor(() => expect(screen.getByLabelText('kept').textContent).toBe('true'));
    const expected = { content: { ...content, question: 'crop=pea' } };
    expect(asked).toEqual([['POST', '/api/weigh-up-drafts', expected]]);
    // The address follows in a render of its own.
    const named = `?crop=pea&draft=${draft.id}`;
    await waitFor(() => expect(screen.getByLabelText('address').textContent).toBe(named));
  });

  it('is written on under its revision when it is opened again', async () => {
    const asked = serve();
    const user = userEvent.setup();
    await render(<Typing opened={{ ...draft, content: { ...content, question: 'crop=pea' } }} />);
    expect(screen.getByLabelText('Grower')).toHaveProperty('value', 'Ada');
    expect(screen.getByLabelText('kept').textContent).toBe('true');
    await user.click(screen.getByLabelText('Farm'));
    await user.paste('Low Field');
    await waitFor(() => expect(asked).toHaveLength(1));
    expect(asked[0]).toMatchObject([
      'PUT',
      `/api/weigh-up-drafts/${draft.id}`,
      { revision: 1, content: { growerName: 'Ada', farmName: 'Low Field' } },
    ]);
  });

  it('whose first saving is still under way is waited for, so that it goes with the weigh-up', async () => {
    const { asked, answer } = serveSlowly();
    const user = userEvent.setup();
    await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    await waitFor(() => expect(asked).toHaveLength(1));
    await user.click(screen.getByRole('button', { name: 'stop' }));
    expect(screen.getByLabelText('stopped at').textContent).toBe('');
    answer();
    await waitFor(() => expect(screen.getByLabelText('stopped at').textContent).toBe(draft.id));
  });

  it('is not begun once the weigh-up is being stored, and is when that failed', async () => {
    const asked = serve();
    const user = userEvent.setup();
    await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    await user.click(screen.getByRole('button', { name: 'stop' }));
    expect(screen.getByLabelText('stopped at').textContent).toBe('none');
    await new Promise((resolve) => setTimeout(resolve, 1500));
    expect(asked).toEqual([]);
    await user.click(screen.getByRole('button', { name: 'go on' }));
    await waitFor(() => expect(asked).toHaveLength(1));
  });

  it('is kept at once when the page is left, with the last edit, and only once', async () => {
    const asked = serve();
    const user = userEvent.setup();
    const { unmount } = await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    unmount();
    await waitFor(() => expect(asked).toHaveLength(1));
    expect(asked[0]).toMatchObject(['POST', '/api/weigh-up-drafts', { content: { growerName: 'Ada' } }]);
    await new Promise((resolve) => setTimeout(resolve, 1500));
    expect(asked).toHaveLength(1);
  });

  it('that is being saved when the page is left is written on by the last edit, not begun twice', async () => {
    const asked: Asked[] = [];
    let answer = () => {};
    const begun = new Promise<void>((resolve) => (answer = resolve));
    vi.stubGlobal('fetch', async (path: string, init: RequestInit = {}) => {
      if (init.method === undefined || init.method === 'GET') return Response.json({ drafts: [] });
      asked.push([init.method, path, JSON.parse(String(init.body))]);
      if (init.method === 'POST') await begun;
      return Response.json({ draft });
    });
    const user = userEvent.setup();
    const { unmount } = await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    await waitFor(() => expect(asked).toHaveLength(1));
    await user.click(screen.getByLabelText('Farm'));
    await user.paste('Low Field');
    unmount();
    answer();
    await waitFor(() => expect(asked).toHaveLength(2));
    expect(asked[1]).toMatchObject([
      'PUT',
      `/api/weigh-up-drafts/${draft.id}`,
      { revision: 1, content: { growerName: 'Ada', farmName: 'Low Field' } },
    ]);
  });

  it('is not kept when the page is left untouched, or for the weigh-up that it became', async () => {
    const asked = serve();
    const user = userEvent.setup();
    (await render(<Typing opened={{ ...draft, content: { ...content, question: 'crop=pea' } }} />)).unmount();
    const { unmount } = await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    await user.click(screen.getByRole('button', { name: 'stop' }));
    await waitFor(() => expect(screen.getByLabelText('stopped at').textContent).toBe('none'));
    unmount();
    await new Promise((resolve) => setTimeout(resolve, 100));
    expect(asked).toEqual([]);
  });

  it('is kept before the session ends, with the last edit', async () => {
    const asked = serve();
    const user = userEvent.setup();
    const { unmount } = await render(
      <>
        <Typing />
        <SignOut />
      </>,
    );
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    await user.click(screen.getByRole('button', { name: 'leave' }));
    await waitFor(() => expect(asked.at(-1)?.[1]).toBe('/api/session'));
    expect(asked.map(([method, path]) => `${method} ${path}`)).toEqual([
      'POST /api/weigh-up-drafts',
      'DELETE /api/session',
    ]);
    expect(asked[0]?.[2]).toMatchObject({ content: { growerName: 'Ada' } });
    // Nothing is left for the server to refuse.
    unmount();
    await new Promise((resolve) => setTimeout(resolve, 100));
    expect(asked).toHaveLength(2);
  });

  it('is kept at once when the page goes out of sight, as a phone puts it away', async () => {
    const asked = serve();
    const user = userEvent.setup();
    await render(<Typing />);
    await user.click(screen.getByLabelText('Grower'));
    await user.paste('Ada');
    vi.spyOn(document, 'visibilityState', 'get').mockReturnValue('hidden');
    act(() => void document.dispatchEvent(new Event('visibilitychange')));
    await vi.waitFor(() => expect(asked).toHaveLength(1), { timeout: 500 });
    vi.restoreAllMocks();
  });

  it('that was written on in another tab is left as it is: what is typed here becomes a draft of its own', async () => {
    const asked: Asked[] = [];
    vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
      const method = init.method ?? 'GET';
      if (method === 'GET') return Promise.resolve(Response.json({ drafts: [draft] }));
      asked.push([method, path, JSON.parse(String(init.body))]);
      return Promise.resolve(
        method === 'PUT'
          ? Response.json({ error: { code: 'revision-conflict' } }, { status: 409 })
          : Response.json({ draft: { ...draft, id: idOf(6) } }),
      );
    });
    const user = userEvent.setup();
    await render(<Typing opened={{ ...draft, content: { ...content, question: 'crop=pea' } }} />);
    await user.click(screen.getByLabelText('Farm'));
    await user.paste('Low Field');
    await waitFor(() => expect(screen.getByLabelText('address').textContent).toContain(idOf(6)));
    expect(asked.map(([method]) => method)).toEqual(['PUT', 'POST']);
    expect(asked[1]?.[2]).toMatchObject({ content: { growerName: 'Ada', farmName: 'Low Field' } });
  });

  it('leads back to its question from the list, and is deleted there', async () => {
    const asked = serve();
    const user = userEvent.setup();
    await render(<DraftList />);
    const link = await screen.findByRole('link', { name: 'Ada' });
    expect(link.getAttribute('href')).toBe(`/weigh-ups/new?crop=pea&region=north&draft=${draft.id}`);
    await user.click(screen.getByRole('button', { name: 'Delete the draft Ada' }));
    await waitFor(() => expect(screen.queryByText('Drafts')).toBeNull());
    expect(asked).toEqual([['DELETE', `/api/weigh-up-drafts/${draft.id}`, null]]);
  });
});
