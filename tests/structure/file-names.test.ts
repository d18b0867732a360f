import { readdirSync } from 'node:fs';
import { basename } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, test } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));

/** Source files below the folders that we write; declarations belong to the file that they declare. */
const sources = ['server', 'shared', 'src', 'drizzle/schema', 'tests']
  .flatMap((folder) =>
    readdirSync(`${root}/${folder}`, { recursive: true, encoding: 'utf8' }).map(
      (path) => `${folder}/${path}`,
    ),
  )
  .filter((path) => /\.(ts|tsx|mjs)$/.test(path) && !/\.d\.(ts|mts)$/.test(path));

test('files are named in kebab case', () => {
  const kebab = /^[a-z0-9]+(-[a-z0-9]+)*(\.test)?\.(ts|tsx|mjs)$/;
  expect(sources.length).toBeGreaterThan(100);
  expect(sources.filter((path) => !kebab.test(basename(path)))).toEqual([]);
});

test('no two files have the same name', () => {
  const names = sources.map((path) => basename(path));
  const repeated = names.filter((name, position) => names.indexOf(name) !== position);
  expect(sources.filter((path) => repeated.includes(basename(path)))).toEqual([]);
});

test('no file is a drawer for whatever fits nowhere else', () => {
  const drawers = /^(utils?|helpers?|common|misc|index|types)\.(ts|tsx|mjs)$/;
  expect(sources.filter((path) => drawers.test(basename(path)))).toEqual([]);
});
