import { screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { AppRoutes } from '#src/routes.tsx';
import { readNext } from '#src/paths.ts';
import { renderClient } from '#tests/client/support/render-client.tsx';

const person = {
  id: '6f1b9a52-1111-4c4e-9b0e-0a5b9c3d2e1f',
  name: 'Ines Quarrel',
  email: 'ines@example.org',
  role: 'advisor',
  language: 'fr',
  regionIds: [],
  phone: null,
};

type Answer = { status: number; body: unknown };

/** A server in miniature: knows who is signed in, and takes one password. */
function stubServer(start: { isSignedIn: boolean }) {
  let isSignedIn = start.isSignedIn;
  let language = person.language;
  const answers: Record<string, (body: string) => Answer> = {
    'GET /api/me': () => ({ status: 200, body: { me: isSignedIn ? person : null } }),
    'POST /api/session': (body) => {
      if (!body.includes('right-password'))
        return { status: 401, body: { error: { code: 'wrong-credentials' } } };
      isSignedIn = true;
      return { status: 200, body: { me: person } };
    },
    'PATCH /api/me': (body) => {
      if (!isSignedIn) return { status: 401, body: { error: { code: 'not-signed-in' } } };
      language = body.includes('"en"') ? 'en' : 'fr';
      return { status: 200, body: { me: { ...person, language } } };
    },
  };
  vi.stubGlobal('fetch', (address: string, init: RequestInit) => {
    const found = answers[`${init.method ?? 'GET'} ${address}`];
    const { status, body } = found?.(String(init.body)) ?? {
      status: 404,
      body: { error: { code: 'not-found' } },
    };
    return Promise.resolve(new Response(JSON.stringify(body), { status }));
  });
  return {
    expireSession: () => {
      isSignedIn = false;
    },
    languageOfAccount: () => language,
  };
}

async function fillIn(password: string) {
  await userEvent.type(await screen.findByLabelText('E-mail'), 'ines@example.org');
  await userEvent.type(screen.getByLabelText('Password'), password);
  await userEvent.click(screen.getByRole('button', { name: 'Sign in' }));
}

describe('signing in', () => {
  it('says in words that the password is wrong and keeps what was typed', async () => {
    stubServer({ isSignedIn: false });
    await renderClient(<AppRoutes />, { at: '/sign-in' });
    await fillIn('wrong-password');
    expect((await screen.findByRole('alert')).textContent).toContain('E-mail or password is not right');
    expect(screen.getByLabelText<HTMLInputElement>('E-mail').value).toBe('ines@example.org');
    expect(document.activeElement).toBe(screen.getByLabelText('Password'));
  });

  it('asks for what is missing beside the field, and focuses the first', async () => {
    stubServer({ isSignedIn: false });
    await renderClient(<AppRoutes />, { at: '/sign-in' });
    await userEvent.click(await screen.findByRole('button', { name: 'Sign in' }));
    const email = screen.getByLabelText('E-mail');
    await waitFor(() => expect(email.getAttribute('aria-invalid')).toBe('true'));
    expect(document.activeElement).toBe(email);
  });

  it('leads an unknown visitor to the door and takes over the language of the account', async () => {
    stubServer({ isSignedIn: false });
    await renderClient(<AppRoutes />, { at: '/' });
    await fillIn('right-password');
    expect(await screen.findByRole('link', { name: 'Pesées' })).toBeTruthy();
    expect(document.documentElement.lang).toBe('fr');
  });
});

describe('a session that has run out', () => {
  it('opens the sign-in dialog over the page and then finishes what was asked', async () => {
    const server = stubServer({ isSignedIn: true });
    await renderClient(<AppRoutes />, { at: '/nowhere' });
    await screen.findByRole('heading', { level: 1, name: 'Rien à cette adresse' });
    await screen.findByRole('button', { name: 'Se déconnecter' });
    server.expireSession();
    await userEvent.click(screen.getByRole('button', { name: 'English' }));
    await screen.findByRole('dialog', { name: 'Please sign in again' });
    expect(screen.getByRole('heading', { level: 1, name: 'Nothing here' })).toBeTruthy();
    const email = await screen.findByLabelText<HTMLInputElement>('E-mail');
    expect(email.value).toBe('ines@example.org');
    await userEvent.type(screen.getByLabelText('Password'), 'right-password');
    await userEvent.click(screen.getByRole('button', { name: 'Sign in' }));
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
    await waitFor(() => expect(server.languageOfAccount()).toBe('en'));
    expect(document.documentElement.lang).toBe('en');
  });
});

describe('the way back after signing in', () => {
  it.each([
    ['/trials?crop=pea', '/trials?crop=pea'],
    ['//evil.example', '/'],
    ['/\\evil.example', '/'],
    ['https://evil.example', '/'],
  ])('%s leads to %s', (next, target) => {
    expect(readNext(new URLSearchParams({ next }))).toBe(target);
  });
});
