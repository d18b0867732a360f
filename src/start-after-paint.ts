/** Where no frame comes the page goes on after this time all the same, ms; a busy phone takes a good part of it for one. */
const longestWait = 2000;
/** What has not been answered by then the client asks for itself, ms. */
const longestAnswer = 10_000;

declare global {
  interface Window {
    /** Replies of the API by their addresses, asked for before the client was there. */
    askedAhead?: Promise<readonly (readonly [address: string, reply: unknown])[]>;
  }
}

/**
 * Stands in a page itself that the server has rendered, and fetches after its first paint what it does not need for that:
 * on a slow phone already to ask for a file takes longer than to paint a sentence. Its own element names the files, by
 * addresses that the server has written: style sheets (`data-styles`), what the client will ask the API for
 * (`data-asks`), code (`data-ahead`), and the entry that is run once style is there (`data-starts`); all but the first
 * may be missing. The root element says when it is painted (`data-painted`) and when its style is there (`data-styled`).
 */
const own = document.querySelector<HTMLScriptElement>('script[data-styles]');

let isStarted = false;

async function start(): Promise<void> {
  if (own === null || isStarted) return;
  isStarted = true;
  document.documentElement.dataset['painted'] = '';
  const { styles, asks, ahead, starts } = own.dataset;
  window.askedAhead = Promise.all(split(asks).map(ask)).then((replies) => replies.flat());
  for (const address of split(ahead)) addLink('modulepreload', address);
  await Promise.all(split(styles).map((address) => settle(addLink('stylesheet', address))));
  document.documentElement.dataset['styled'] = '';
  if (starts !== undefined) await import(/* @vite-ignore */ starts);
}

const split = (addresses: string | undefined): readonly string[] =>
  addresses?.split(' ').filter((address) => address !== '') ?? [];

function addLink(rel: string, href: string): HTMLLinkElement {
  const link = Object.assign(document.createElement('link'), { rel, href });
  document.head.append(link);
  return link;
}

/** What fails is asked for by the client, which says what is the matter. */
async function ask(address: string): Promise<[address: string, reply: unknown][]> {
  try {
    const answer = await fetch(address, { signal: AbortSignal.timeout(longestAnswer) });
    return answer.ok ? [[address, await answer.json()]] : [];
  } catch {
    return [];
  }
}

/** Style that cannot be fetched keeps nothing from working. */
const settle = (link: HTMLLinkElement): Promise<unknown> =>
  new Promise((resolve) => {
    link.onload = resolve;
    link.onerror = resolve;
  });

// A frame is painted after its callbacks; what is put off from there comes after that.
requestAnimationFrame(() => setTimeout(() => void start()));
// A tab in the background paints nothing.
setTimeout(() => void start(), document.hidden ? 0 : longestWait);

export {};
