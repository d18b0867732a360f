import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { clientPages } from '#server/client-page/page-needs.ts';
import { paths } from '#src/paths.ts';

test('every address of the client is a page that the server knows, but the one that only leads on', () => {
  const { home, ...ofPages } = paths;
  expect(home).toBe('/');
  expect(clientPages.map(({ path }) => path).toSorted()).toEqual(Object.values(ofPages).toSorted());
});

test('an address without parameters comes before the one that would take it for a parameter', () => {
  const earlier = (path: string) => clientPages.findIndex((page) => page.path === path);
  expect(earlier('/weigh-ups/new')).toBeLessThan(earlier('/weigh-ups/:weighUpId'));
});

test('the modules are those that the client fetches for its pages', () => {
  const routes = readFileSync(new URL('../../src/routes.tsx', import.meta.url), 'utf8');
  const fetched = [...routes.matchAll(/import\('\.\/(features\/[\w/.-]+)'\)/g)].map(
    ([, path]) => `src/${path}`,
  );
  expect(fetched.length).toBeGreaterThan(10);
  expect(clientPages.map(({ source }) => source).toSorted()).toEqual(fetched.toSorted());
});

test('what a page asks for needs nothing but the parameters of its path', () => {
  for (const { path, asks } of clientPages) {
    for (const contract of asks) {
      expect([contract.path, contract.method, contract.query, contract.body]).toEqual([
        contract.path,
        'GET',
        undefined,
        undefined,
      ]);
      const wanted = [...contract.path.matchAll(/:\w+/g)].map(([name]) => name);
      expect(wanted.every((name) => path.includes(name))).toBe(true);
    }
  }
});
