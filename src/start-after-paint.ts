/** Where no frame comes the page goes on after this time all the same, ms; a busy phone takes a good part of it for one. */
const longestWait = 2000;

/**
 * Stands in a page itself that the server has rendered, and fetches after its first paint what it does not need for that:
 * on a slow phone already to ask for a file takes longer than to paint a sentence. Its own element names the files, by
 * addresses that the server has written: style sheets (`data-styles`), code (`data-ahead`), and the entry that is run
 * once style is there (`data-starts`), which may be missing. The root element then says that it is painted (`data-painted`).
 */
const own = document.querySelector<HTMLScriptElement>('script[data-styles]');

let isStarted = false;

async function start(): Promise<void> {
  if (own === null || isStarted) return;
  isStarted = true;
  document.documentElement.dataset['painted'] = '';
  const { styles, ahead, starts } = own.dataset;
  for (const address of split(ahead)) addLink('modulepreload', address);
  await Promise.all(split(styles).map((address) => settle(addLink('stylesheet', address))));
  if (starts !== undefined) await import(/* @vite-ignore */ starts);
}

const split = (addresses: string | undefined): readonly string[] => addresses?.split(' ') ?? [];

function addLink(rel: string, href: string): HTMLLinkElement {
  const link = Object.assign(document.createElement('link'), { rel, href });
  document.head.append(link);
  return link;
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
