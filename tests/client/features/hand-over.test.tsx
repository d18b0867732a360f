import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import type { Language, Me } from '#shared/account.ts';
import type { CopyMail, GrowerCopyLine } from '#shared/grower-copy.ts';
import { HandOver } from '#src/features/weigh-up/hand-over.tsx';
import { renderClient } from '#tests/client/support/render-client.tsx';
import { idOf } from '#tests/client/support/weigh-up-factory.ts';

const weighUpId = idOf(90);
const token = 'a-secret-that-nobody-guesses-1234';
const link = `https://trials.example.org/copy/${token}`;

const mail: CopyMail = {
  recipient: 'maren@example.org',
  state: 'waiting',
  attempts: 0,
  sentAt: null,
  nextAttemptAt: '2026-12-01T09:00:00.000Z',
  failure: null,
  serverWords: null,
};

const copy: GrowerCopyLine = {
  id: idOf(50),
  language: 'fr',
  createdAt: '2026-12-01T09:00:00.000Z',
  expiresAt: '2099-12-01T09:00:00.000Z',
  revokedAt: null,
  openings: 0,
  lastOpenedAt: null,
  laterChanges: [],
  mail: null,
};

const me: Me = {
  ...{ id: idOf(10), name: 'Ines Quarrel', email: 'ines@example.org', language: 'en', role: 'advisor' },
  ...{ regionIds: [], phone: '555-0142' },
};

type Asked = { method: string; path: string; body: unknown };

/** Answers like the server and keeps what was asked of it, the lists aside. */
function serve(isMailSetUp: boolean, copies: GrowerCopyLine[] = []): Asked[] {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', (path: string, init: RequestInit = {}) => {
    const method = init.method ?? 'GET';
    if (path === '/api/me' && method === 'GET') {
      // The page speaks the language of the account.
      const language = document.documentElement.lang;
      return Promise.resolve(Response.json({ me: { ...me, language } }));
    }
    if (method === 'GET') return Promise.resolve(Response.json({ copies, isMailSetUp }));
    asked.push({ method, path, body: JSON.parse(String(init.body ?? 'null')) });
    if (path === '/api/me') {
      const { phone } = JSON.parse(String(init.body)) as Pick<Me, 'phone'>;
      return Promise.resolve(Response.json({ me: { ...me, phone } }));
    }
    const answer = path.endsWith('/grower-copies') ? { copy, path: `/copy/${token}`, link } : { copy };
    return Promise.resolve(Response.json(answer));
  });
  return asked;
}

/** Of this machine, as a browser gives it. */
const { timeZone } = Intl.DateTimeFormat().resolvedOptions();

const open = (language: Language = 'en') =>
  renderClient(<HandOver weighUpId={weighUpId} hasUnsaved={false} />, { language, namespaces: ['weigh-up'] });

describe('handing a copy over', () => {
  it('makes a copy, and shows its link as text and as a code that a camera reads', async () => {
    const asked = serve(true);
    await open();
    await userEvent.click(await screen.findByRole('button', { name: 'Make a grower copy' }));
    expect(await screen.findByLabelText('Link to the grower copy')).toHaveProperty('value', link);
    expect(asked).toEqual([
      {
        method: 'POST',
        path: `/api/weigh-ups/${weighUpId}/grower-copies`,
        body: { language: 'en', validDays: 365, timeZone },
      },
    ]);
    const code = screen.getByRole('img', { name: 'QR code that opens the grower copy' });
    await waitFor(() => expect(code.querySelector('path')).not.toBeNull());
    // 65 characters need version 5 at level M: 37 modules, four of quiet on each side (ISO/IEC 18004, from memory).
    expect(code.getAttribute('viewBox')).toBe('0 0 45 45');
    // The finder of the upper left corner: seven dark modules in its first row, none in the quiet zone.
    const dark = code.querySelector('path')?.getAttribute('d') ?? '';
    expect(dark).toMatch(/^M4 4h7v1h-7z/);
    expect(dark).not.toMatch(/M[0-3] | [0-3]h/);
  });

  it('sends the address with the wish, trimmed, and says on the button that it will', async () => {
    const asked = serve(true);
    await open();
    await userEvent.type(
      await screen.findByLabelText('Grower’s e-mail, if the link should be sent'),
      ' maren@example.org ',
    );
    await userEvent.click(screen.getByRole('button', { name: 'Make the copy and send its link' }));
    await waitFor(() =>
      expect(asked[0]?.body).toEqual({
        language: 'en',
        validDays: 365,
        timeZone,
        email: 'maren@example.org',
      }),
    );
    expect(await screen.findByText(/The mail to maren@example.org is on its way/)).toBeTruthy();
  });

  it('keeps another phone number in the account before the copy is made, and an unchanged one not', async () => {
    const asked = serve(true);
    await open();
    const phone = await screen.findByLabelText('Your phone number, for the grower’s questions');
    expect(phone).toHaveProperty('value', '555-0142');
    const make = screen.getByRole('button', { name: 'Make a grower copy' });
    await userEvent.clear(phone);
    await userEvent.type(phone, 'my mobile');
    await userEvent.click(make);
    await screen.findByText(/^Please give one phone number/);
    expect(document.activeElement).toBe(phone);
    expect(asked).toEqual([]);
    await userEvent.clear(phone);
    await userEvent.type(phone, ' (555) 0199 ');
    await userEvent.click(make);
    await screen.findByLabelText('Link to the grower copy');
    await userEvent.click(make);
    await waitFor(() => expect(asked).toHaveLength(3));
    expect(asked.map(({ method }) => method)).toEqual(['PATCH', 'POST', 'POST']);
    expect(asked[0]?.body).toEqual({ phone: '(555) 0199' });
    await userEvent.clear(phone);
    await userEvent.click(make);
    await waitFor(() => expect(asked).toHaveLength(5));
    expect(asked[3]?.body).toEqual({ phone: null });
  });

  it('asks for one whole address before anything is made', async () => {
    const asked = serve(true);
    await open('fr');
    const address = await screen.findByLabelText('Courriel du producteur, si le lien doit être envoyé');
    await userEvent.type(address, 'a@example.org, b@example.org');
    await userEvent.click(screen.getByRole('button', { name: 'Établir l’exemplaire et envoyer son lien' }));
    await screen.findByText('Indiquez une seule adresse complète, comme nom@example.org.');
    expect(document.activeElement).toBe(address);
    expect(asked).toEqual([]);
  });

  it('says where no mail can be sent, and offers none', async () => {
    serve(false);
    await open();
    await screen.findByText(/Sending mail is not set up on this server/);
    await userEvent.click(screen.getByRole('button', { name: 'Make a grower copy' }));
    await screen.findByLabelText('Link to the grower copy');
    expect(screen.queryByLabelText(/e-mail/)).toBeNull();
  });

  it('sends the link on the card to another address', async () => {
    const asked = serve(true);
    await open();
    await userEvent.click(await screen.findByRole('button', { name: 'Make a grower copy' }));
    await userEvent.type(await screen.findByLabelText('Send this link by e-mail'), 'other@example.org');
    await userEvent.click(screen.getByRole('button', { name: 'Send' }));
    await screen.findByText(/The mail to other@example.org is on its way/);
    expect(asked[1]).toEqual({
      method: 'POST',
      path: `/api/grower-copies/${copy.id}/mails`,
      body: { email: 'other@example.org', token },
    });
  });
});

describe('what became of the mail', () => {
  const row = async () => within((await screen.findAllByRole('row'))[1] ?? document.body);

  it('waits before the first try', async () => {
    serve(true, [{ ...copy, mail }]);
    await open();
    expect((await row()).getByText('waiting to be sent to maren@example.org')).toBeTruthy();
    expect((await row()).queryByRole('button', { name: /Try/ })).toBeNull();
  });

  it('says why it still waits, and tries at once when asked', async () => {
    const asked = serve(true, [{ ...copy, mail: { ...mail, attempts: 2, failure: 'server-away' } }]);
    await open();
    expect(
      (await row()).getByText(/waiting for maren@example.org, next try on 1 December 2026/),
    ).toBeTruthy();
    expect((await row()).getByText('The mail server cannot be reached.')).toBeTruthy();
    await userEvent.click(
      (await row()).getByRole('button', { name: 'Try the mail to maren@example.org now' }),
    );
    await waitFor(() => expect(asked[0]?.path).toBe(`/api/grower-copies/${copy.id}/mail-retries`));
  });

  it('says when it was sent, and that its link is not kept', async () => {
    serve(true, [{ ...copy, mail: { ...mail, state: 'sent', attempts: 1, sentAt: copy.createdAt } }]);
    await open('fr');
    expect((await row()).getByText(/envoyé à maren@example.org le 1er décembre 2026/)).toBeTruthy();
    expect(screen.getByText(/établissez un nouvel exemplaire/)).toBeTruthy();
  });

  it('says why it failed, in words and in the mail server’s own', async () => {
    const failed = { ...mail, state: 'failed', attempts: 1, failure: 'recipient-refused' } as const;
    serve(true, [{ ...copy, mail: { ...failed, serverWords: '550 No such mailbox here' } }]);
    await open();
    expect((await row()).getByText('not sent to maren@example.org')).toBeTruthy();
    expect((await row()).getByText(/does not know or does not take this address/)).toBeTruthy();
    expect((await row()).getByText('The mail server’s words: “550 No such mailbox here”')).toBeTruthy();
    expect((await row()).queryByRole('button', { name: /Try/ })).toBeNull();
  });
});
