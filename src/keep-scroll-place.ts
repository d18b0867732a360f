const storageKey = 'scroll-place';

/** A page that is not as long as it was by then is left where it is, ms. */
const longestWait = 8000;

type Place = { address: string; top: number };

function readPlace(): Place | null {
  try {
    const { address, top } = JSON.parse(sessionStorage.getItem(storageKey) ?? 'null') as Partial<Place>;
    return typeof address === 'string' && typeof top === 'number' ? { address, top } : null;
  } catch {
    // Nothing kept, or a browser that keeps nothing.
    return null;
  }
}

function keepPlace(): void {
  try {
    const place: Place = { address: window.location.href, top: window.scrollY };
    sessionStorage.setItem(storageKey, JSON.stringify(place));
  } catch {
    // A browser that keeps nothing: the page then begins at its top.
  }
}

/**
 * A page that is loaded again goes on where it was being read. The browser tries that too, but only while the page is as
 * short as its first rendering; this waits until it is long enough, or until the reader moves it.
 */
export function keepScrollPlace(): void {
  window.addEventListener('pagehide', keepPlace);
  const [visit] = performance.getEntriesByType('navigation');
  const isAgain = visit instanceof PerformanceNavigationTiming && visit.type !== 'navigate';
  const place = isAgain ? readPlace() : null;
  if (place === null || place.address !== window.location.href || place.top === 0) return;
  const growth = new ResizeObserver(() => {
    if (document.documentElement.scrollHeight - window.innerHeight < place.top) return;
    window.scrollTo(0, place.top);
    stop();
  });
  const moves = ['wheel', 'touchstart', 'pointerdown', 'keydown'] as const;
  const stop = () => {
    growth.disconnect();
    for (const move of moves) window.removeEventListener(move, stop);
  };
  for (const move of moves) window.addEventListener(move, stop, { passive: true });
  setTimeout(stop, longestWait);
  growth.observe(document.documentElement);
}
