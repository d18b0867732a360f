import { accessSync, constants } from 'node:fs';
import { delimiter, join } from 'node:path';

const names = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable'];

/** @returns {string | null} the path of an installed Chromium */
export function findChromium() {
  const folders = ['/usr/bin', ...(process.env.PATH ?? '').split(delimiter)];
  const candidates = folders.flatMap((folder) => names.map((name) => join(folder, name)));
  return candidates.find(isExecutable) ?? null;
}

function isExecutable(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
