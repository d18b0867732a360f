import { readFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, it } from 'vitest';
import { listImportsDeep } from '#tests/support/import-graph.ts';

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** Style sheets that stand in a page themselves, and the components that the page begins with. */
const pages = [
  ['src/features/grower-copy/copy-page.css', ['copy-page.tsx', 'copy-answer.tsx']],
  ['src/features/weigh-up/first-view.css', ['first-view.tsx']],
] as const;

/** Files without any class of their own. */
const isPlain = (path: string) => !readFileSync(join(root, path), 'utf8').includes('className');

it.each(pages)('%s is made from every component of its page, and from no other', (sheet, entries) => {
  const folder = dirname(sheet);
  const named = [...readFileSync(join(root, sheet), 'utf8').matchAll(/@source '([^']+)'/g)]
    .map(([, source = '']) => join(folder, source))
    // A feature's own folder is named as a whole.
    .filter((path) => path !== folder);
  const imported = entries
    .flatMap((entry) => [...listImportsDeep(`${folder}/${entry}`)])
    .filter((path) => path.endsWith('.tsx') && !isPlain(path))
    .filter((path) => named.some((other) => dirname(other) === dirname(path)));
  expect(named.map((path) => basename(path)).toSorted()).toEqual(
    [...new Set(imported)].map((path) => basename(path)).toSorted(),
  );
});
