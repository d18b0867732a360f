/**
 * Opens whatever is folded while the page is put on paper, and folds it again after: for browsers whose style sheets do
 * not reach the inside of a closed `details`.
 */
export function openDetailsOnPaper(): void {
  let opened: HTMLDetailsElement[] = [];
  window.addEventListener('beforeprint', () => {
    opened = [...document.querySelectorAll<HTMLDetailsElement>('details:not([open])')];
    for (const details of opened) details.open = true;
  });
  window.addEventListener('afterprint', () => {
    for (const details of opened) details.open = false;
    opened = [];
  });
}
