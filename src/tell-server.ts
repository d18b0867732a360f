const oneYear = 365 * 24 * 60 * 60;

/** Leaves a choice of this browser in a cookie, so that the server knows it when it writes the next page. */
export function tellServer(cookieName: string, choice: string): void {
  document.cookie = `${cookieName}=${choice}; Path=/; Max-Age=${oneYear}; SameSite=Lax`;
}
