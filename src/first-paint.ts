import { startTransition, useEffect, useState } from 'react';

/** A tab in the background paints nothing: its page is whole after this time all the same, ms. */
const longestWait = 200;

let isPainted = true;

/** The document has just been loaded: what comes first is painted before the rest of the page is rendered. */
export function expectFirstPaint(): void {
  isPainted = false;
}

/**
 * Whether the page has been painted since its document was loaded: what stands further down waits for that, since a slow
 * phone takes seconds for a long page. True at once on every page that is opened after that one.
 */
export function useFirstPaintDone(): boolean {
  const [isDone, setDone] = useState(isPainted);
  useEffect(() => {
    if (isDone) return;
    const goOn = () => {
      isPainted = true;
      startTransition(() => setDone(true));
    };
    let soon: number | undefined;
    // A frame is painted after its callbacks; what is put off from there comes after that.
    const frame = requestAnimationFrame(() => {
      soon = window.setTimeout(goOn);
    });
    const later = window.setTimeout(goOn, longestWait);
    return () => {
      cancelAnimationFrame(frame);
      clearTimeout(soon);
      clearTimeout(later);
    };
  }, [isDone]);
  return isDone;
}
