import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** Imports that exist at run time: a cycle of types alone does no harm. */
const importPattern = /^(?:import|export)\s+(?!type\b)[^;]*?from\s+'([^']+)'|^import\s+'([^']+)'/gm;

function listImports(path: string): string[] {
  const code = readFileSync(join(root, path), 'utf8');
  return [...code.matchAll(importPattern)]
    .map((match) => match[1] ?? match[2] ?? '')
    .filter((source) => /^[.#]/.test(source))
    .map((source) => (source.startsWith('#') ? source.slice(1) : join(dirname(path), source)))
    .filter((target) => /\.(ts|tsx|mjs)$/.test(target) && existsSync(join(root, target)));
}

/** The first circle found from a file on, as the names along it; null when there is none. */
function findCycle(path: string, trail: readonly string[], done: Set<string>): string[] | null {
  if (trail.includes(path)) return [...trail.slice(trail.indexOf(path)), path];
  if (done.has(path)) return null;
  for (const target of listImports(path)) {
    const cycle = findCycle(target, [...trail, path], done);
    if (cycle !== null) return cycle;
  }
  done.add(path);
  return null;
}

test('no file imports itself by way of others', () => {
  const files = ['server', 'shared', 'src', 'drizzle/schema'].flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
      .filter((name) => /(?<!\.d)\.(ts|tsx|mjs)$/.test(name))
      .map((name) => `${folder}/${name}`),
  );
  const done = new Set<string>();
  expect(files.flatMap((file) => listImports(file)).length).toBeGreaterThan(100);
  expect(files.map((file) => findCycle(file, [], done)).filter((cycle) => cycle !== null)).toEqual([]);
});
