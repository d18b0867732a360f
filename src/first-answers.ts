import type { Contract } from '#shared/contract.ts';
import { firstAnswersId } from '#shared/page-exchange.ts';
import { addressOf, type CallInput, type ReplyOf } from './api-client.ts';

/** An answer that nobody wanted for so long is asked for anew, ms: as long as a query counts as fresh. */
const freshFor = 30_000;

let untaken: Map<string, unknown> | null = null;

/** What the server put into the page, read when it is first wanted. */
function readPage(): Map<string, unknown> {
  if (untaken !== null) return untaken;
  const text = document.getElementById(firstAnswersId)?.textContent ?? '{}';
  // Written by our own server; each reply is parsed by its contract when it is taken.
  untaken = new Map(Object.entries(JSON.parse(text) as Record<string, unknown>));
  setTimeout(forgetFirstAnswers, freshFor);
  return untaken;
}

/** Waits for what the page asks for by itself while the client is fetched, and takes it to what came with the page. */
export async function awaitFirstAnswers(): Promise<void> {
  for (const [address, reply] of (await window.askedAhead) ?? []) readPage().set(address, reply);
}

/**
 * The reply that came with the page, once: whoever asks after that asks the server.
 * @returns undefined where none came, or where it is not the contract's
 */
export function takeFirstAnswer<C extends Contract>(
  contract: C,
  input: CallInput<C>,
): ReplyOf<C> | undefined {
  const answer = peekFirstAnswer(contract, input);
  readPage().delete(addressOf(contract, input));
  return answer;
}

/** The same, left there for whom it is meant for. */
export function peekFirstAnswer<C extends Contract>(
  contract: C,
  input: CallInput<C>,
): ReplyOf<C> | undefined {
  const parsed = contract.reply.safeParse(readPage().get(addressOf(contract, input)));
  // The contract's own schema has just parsed it.
  return parsed.success ? (parsed.data as ReplyOf<C>) : undefined;
}

/** Drops what is left: it was meant for the page as it was opened, and for the person who opened it. */
export function forgetFirstAnswers(): void {
  untaken = new Map();
}
