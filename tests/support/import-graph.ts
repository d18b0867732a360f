import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** Imports that exist at run time: types alone bring nothing along. */
const importPattern = /^(?:import|export)\s+(?!type\b)[^;]*?from\s+'([^']+)'|^import\s+'([^']+)'/gm;

/**
 * The project's own files that a file imports at run time.
 * @param path from the project's folder, as are the paths returned
 */
export function listImports(path: string): string[] {
  const code = readFileSync(join(root, path), 'utf8');
  return [...code.matchAll(importPattern)]
    .map((match) => match[1] ?? match[2] ?? '')
    .filter((source) => /^[.#]/.test(source))
    .map((source) => (source.startsWith('#') ? source.slice(1) : join(dirname(path), source)))
    .filter((target) => /\.(ts|tsx|mjs)$/.test(target) && existsSync(join(root, target)));
}

/** The file itself and all that it imports, by whatever way. */
export function listImportsDeep(path: string, found = new Set<string>()): Set<string> {
  if (!found.has(path)) {
    found.add(path);
    for (const target of listImports(path)) listImportsDeep(target, found);
  }
  return found;
}
