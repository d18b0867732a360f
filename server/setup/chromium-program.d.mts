/** The path of an installed Chromium; null when there is none. */
export function findChromium(): string | null;
