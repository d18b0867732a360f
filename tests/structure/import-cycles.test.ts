import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';
import { listImports } from '#tests/support/import-graph.ts';

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

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
