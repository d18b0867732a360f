/** Without a frame, as in a tab in the background, the client starts after this time all the same, ms. */
const longestWait = 200;

/**
 * Stands in for the client's entry where the server has rendered the top of the page: on a slow phone the client's start
 * takes longer than all that is seen first, so it waits until that is painted.
 */
let entry = document.querySelector<HTMLScriptElement>('script[data-starts]')?.dataset['starts'];

function start(): void {
  const address = entry;
  entry = undefined;
  // The address is the server's, of a file that is on its way already.
  if (address !== undefined) void import(/* @vite-ignore */ address);
}

// A frame is painted after its callbacks; what is put off from there comes after that.
requestAnimationFrame(() => setTimeout(start));
setTimeout(start, longestWait);

export {};
