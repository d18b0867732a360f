import { afterEach, describe, expect, it, vi } from 'vitest';
import { changeMe, changeAccount, readMe, signIn } from '#shared/account.ts';
import { listTrials } from '#shared/trial.ts';
import { addressOf, ApiError, callApi, onSessionExpired } from '#src/api-client.ts';

const person = {
  id: '6f1b9a52-1111-4c4e-9b0e-0a5b9c3d2e1f',
  name: 'Ines Quarrel',
  email: 'ines@example.org',
  role: 'advisor',
  language: 'en',
  regionIds: [],
  phone: null,
};

const answer = (status: number, body: unknown) => () =>
  Promise.resolve(
    new Response(typeof body === 'string' ? body : JSON.stringify(body), {
      status,
      headers: { 'content-type': 'application/json' },
    }),
  );
const refusal = (status: number, code: string) => answer(status, { error: { code } });

/** Stands in for the network: each call gets the next answer. */
function stubFetch(...answers: (() => Promise<Response>)[]) {
  const fetchStub = vi.fn((_address: string, _init: RequestInit) => {
    const next = answers.shift();
    if (!next) throw new Error('one call too many');
    return next();
  });
  vi.stubGlobal('fetch', fetchStub);
  return fetchStub;
}

async function failureOf(call: Promise<unknown>): Promise<ApiError> {
  const error: unknown = await call.then(
    () => undefined,
    (failure: unknown) => failure,
  );
  if (!(error instanceof ApiError)) throw new Error('the call did not fail as an ApiError', { cause: error });
  return error;
}

afterEach(() => {
  vi.unstubAllGlobals();
  onSessionExpired(() => Promise.resolve(false));
});

describe('addresses', () => {
  it('fill parameters in and leave out what is not asked', () => {
    expect(addressOf(changeAccount, { params: { accountId: 'a/b' } })).toBe('/api/accounts/a%2Fb');
    expect(addressOf(listTrials, { query: { crop: 'field pea', region: undefined, season: 2026 } })).toBe(
      '/api/trials?crop=field+pea&season=2026',
    );
  });
});

describe('a call', () => {
  it('sends JSON and gives back what the contract says, without undeclared fields', async () => {
    const fetchStub = stubFetch(answer(200, { me: { ...person, passwordHash: 'x' } }));
    const reply = await callApi(changeMe, { body: { language: 'en' } });
    expect(reply).toEqual({ me: person });
    expect(fetchStub).toHaveBeenCalledWith(
      '/api/me',
      expect.objectContaining({ method: 'PATCH', body: '{"language":"en"}' }),
    );
  });

  it('carries the code, values and fields of a refusal', async () => {
    const error = {
      code: 'invalid-input',
      values: { limit: 3 },
      issues: [{ path: 'email', reason: 'too_small' }],
    };
    stubFetch(answer(422, { error }));
    const failure = await failureOf(callApi(signIn, { body: { email: '', password: '' } }));
    expect(failure).toMatchObject({ status: 422, ...error, isPassing: false });
  });

  it('tells a missing network, a server that is away and an answer that breaks the contract apart', async () => {
    stubFetch(() => Promise.reject(new TypeError('network')));
    expect(await failureOf(callApi(readMe, {}))).toMatchObject({ code: 'offline', isPassing: true });
    stubFetch(refusal(503, 'database-away'));
    expect(await failureOf(callApi(readMe, {}))).toMatchObject({ code: 'database-away', isPassing: true });
    stubFetch(answer(502, '<html>Bad gateway</html>'));
    expect(await failureOf(callApi(readMe, {}))).toMatchObject({ code: 'database-away', isPassing: true });
    stubFetch(answer(200, { me: { name: 'x' } }));
    expect(await failureOf(callApi(readMe, {}))).toMatchObject({
      code: 'unreadable-reply',
      isPassing: false,
    });
  });

  it('lets an aborted call stay an abort', async () => {
    const abort = new AbortController();
    stubFetch(() => Promise.reject(new DOMException('stopped', 'AbortError')));
    abort.abort();
    await expect(callApi(readMe, {}, abort.signal)).rejects.toThrow('stopped');
  });
});

describe('a session that has run out', () => {
  it('asks to sign in again and sends the same request once more', async () => {
    const fetchStub = stubFetch(refusal(401, 'not-signed-in'), answer(200, { me: person }));
    onSessionExpired(() => Promise.resolve(true));
    await expect(callApi(changeMe, { body: { language: 'fr' } })).resolves.toEqual({ me: person });
    const bodies = fetchStub.mock.calls.map(([, init]) => init.body);
    expect(bodies).toEqual(['{"language":"fr"}', '{"language":"fr"}']);
  });

  it('fails with the refusal where the person does not', async () => {
    stubFetch(refusal(401, 'not-signed-in'));
    expect(await failureOf(callApi(changeMe, { body: { language: 'fr' } }))).toMatchObject({
      code: 'not-signed-in',
    });
  });

  it('does not ask again over a wrong password', async () => {
    const ask = vi.fn(() => Promise.resolve(true));
    onSessionExpired(ask);
    stubFetch(refusal(401, 'wrong-credentials'));
    expect(await failureOf(callApi(signIn, { body: { email: 'a', password: 'b' } }))).toMatchObject({
      code: 'wrong-credentials',
    });
    expect(ask).not.toHaveBeenCalled();
  });
});
