import { useSyncExternalStore } from 'react';
import { flushSync } from 'react-dom';

let isPrinting = false;

function subscribe(onChange: () => void): () => void {
  const set = (value: boolean) => () => {
    isPrinting = value;
    // The sheet is laid out as soon as the event is over.
    flushSync(onChange);
  };
  const [begin, end] = [set(true), set(false)];
  window.addEventListener('beforeprint', begin);
  window.addEventListener('afterprint', end);
  return () => {
    window.removeEventListener('beforeprint', begin);
    window.removeEventListener('afterprint', end);
  };
}

/** Whether the page is being put on paper: for what stands elsewhere there, which a style sheet alone cannot move. */
export function usePrinting(): boolean {
  return useSyncExternalStore(subscribe, () => isPrinting);
}
