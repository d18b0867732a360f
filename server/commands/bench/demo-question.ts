import type { APIRequestContext } from 'playwright-core';
import { demoAccounts } from '#server/demo/demo-accounts.ts';

/** A weigh-up of four candidates, and a copy of it. */
export type DemoQuestion = {
  /** Paths of their pages. */
  weighUp: string;
  copy: string;
  candidateIds: string[];
};

/** Asks a question of the demo as its advisor, who is signed in by it. */
export async function askDemoQuestion(request: APIRequestContext): Promise<DemoQuestion> {
  await signInAdvisor(request);
  const [first] = (await readJson<{ weighUps: { id: string }[] }>(await request.get('/api/weigh-ups')))
    .weighUps;
  const { weighUp } = await readJson<{ weighUp: { candidateIds: string[] } }>(
    await request.get(`/api/weigh-ups/${first?.id ?? ''}`),
  );
  const candidateIds = weighUp.candidateIds.slice(0, 4);
  const made = await readJson<{ weighUp: { id: string } }>(
    await request.post('/api/weigh-ups', { data: { ...weighUp, candidateIds } }),
  );
  const path = `/api/weigh-ups/${made.weighUp.id}/grower-copies`;
  const copy = await readJson<{ path: string }>(await request.post(path, { data: { language: 'en' } }));
  return { weighUp: `/weigh-ups/${made.weighUp.id}`, copy: copy.path, candidateIds };
}

/** Signs the demo's advisor in. */
export async function signInAdvisor(request: APIRequestContext): Promise<void> {
  const { email, password } = demoAccounts.advisor;
  await readJson(await request.post('/api/session', { data: { email, password } }));
}

async function readJson<T>(reply: Awaited<ReturnType<APIRequestContext['get']>>): Promise<T> {
  if (!reply.ok()) throw new Error(`${reply.url()} answered ${reply.status()}: ${await reply.text()}`);
  // What the product's own contract promises.
  return (await reply.json()) as T;
}
