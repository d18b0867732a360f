import { afterEach, describe, expect, it, vi } from 'vitest';
import { readMe } from '#shared/account.ts';
import { firstAnswersId } from '#shared/page-exchange.ts';
import { listWeighUps, readWeighUp } from '#shared/weigh-up.ts';

const person = {
  id: '6f1b9a52-1111-4c4e-9b0e-0a5b9c3d2e1f',
  name: 'Ines Quarrel',
  email: 'ines@example.org',
  role: 'advisor',
  language: 'fr',
  regionIds: [],
  phone: null,
};

/** The client's part of it as a page finds it that has just been loaded with these answers. */
async function loadPage(answers: unknown) {
  vi.resetModules();
  document.body.innerHTML = '';
  const data = document.createElement('script');
  data.type = 'application/json';
  data.id = firstAnswersId;
  data.textContent = JSON.stringify(answers);
  document.body.append(data);
  return import('#src/first-answers.ts');
}

afterEach(() => {
  vi.useRealTimers();
  document.body.innerHTML = '';
});

describe('answers that come with the page', () => {
  it('are taken once, and looked at without being taken', async () => {
    const { peekFirstAnswer, takeFirstAnswer } = await loadPage({ '/api/me': { me: person } });
    expect(peekFirstAnswer(readMe, {})).toEqual({ me: person });
    expect(takeFirstAnswer(readMe, {})).toEqual({ me: person });
    expect(takeFirstAnswer(readMe, {})).toBeUndefined();
    expect(peekFirstAnswer(readMe, {})).toBeUndefined();
  });

  it('are found by the whole address, and none of another', async () => {
    const { takeFirstAnswer } = await loadPage({ '/api/weigh-ups': { weighUps: [] } });
    expect(takeFirstAnswer(readWeighUp, { params: { weighUpId: person.id } })).toBeUndefined();
    expect(takeFirstAnswer(listWeighUps, {})).toEqual({ weighUps: [] });
  });

  it('are also those that the page has asked for by itself', async () => {
    window.askedAhead = Promise.resolve([['/api/weigh-ups', { weighUps: [] }]]);
    const { awaitFirstAnswers, takeFirstAnswer } = await loadPage({ '/api/me': { me: person } });
    expect(takeFirstAnswer(listWeighUps, {})).toBeUndefined();
    await awaitFirstAnswers();
    expect(takeFirstAnswer(listWeighUps, {})).toEqual({ weighUps: [] });
    expect(takeFirstAnswer(readMe, {})).toEqual({ me: person });
    delete window.askedAhead;
    await awaitFirstAnswers();
    expect(takeFirstAnswer(listWeighUps, {})).toBeUndefined();
  });

  it('are none where they are not what the contract promises, and none in a page without any', async () => {
    const broken = await loadPage({ '/api/me': { me: { ...person, role: 'king' } } });
    expect(broken.takeFirstAnswer(readMe, {})).toBeUndefined();
    const bare = await loadPage({});
    document.body.innerHTML = '';
    expect(bare.takeFirstAnswer(readMe, {})).toBeUndefined();
  });

  it('are dropped when another person comes, and when they are half a minute old', async () => {
    const left = await loadPage({ '/api/me': { me: person } });
    left.forgetFirstAnswers();
    expect(left.takeFirstAnswer(readMe, {})).toBeUndefined();
    vi.useFakeTimers();
    const old = await loadPage({ '/api/me': { me: person } });
    expect(old.peekFirstAnswer(readMe, {})).toEqual({ me: person });
    vi.advanceTimersByTime(29_000);
    expect(old.peekFirstAnswer(readMe, {})).toEqual({ me: person });
    vi.advanceTimersByTime(2_000);
    expect(old.takeFirstAnswer(readMe, {})).toBeUndefined();
  });
});
