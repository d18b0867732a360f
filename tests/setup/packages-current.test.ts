import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { arePackagesCurrent } from '#server/setup/install-packages.mjs';

type Entry = { version?: string; integrity?: string; optional?: boolean };
let project: string;

beforeAll(() => {
  project = mkdtempSync(join(tmpdir(), 'gavelrow-packages-'));
  mkdirSync(join(project, 'node_modules'));
});

afterAll(() => {
  rmSync(project, { recursive: true, force: true });
});

const wanted: Record<string, Entry> = {
  '': { version: '1.0.0' },
  'node_modules/a': { version: '1.0.0', integrity: 'sha512-a' },
  'node_modules/for-another-system': { version: '2.0.0', optional: true },
};

function isCurrentWith(installed: Record<string, Entry> | null): boolean {
  writeFileSync(join(project, 'package-lock.json'), JSON.stringify({ packages: wanted }));
  const record = join(project, 'node_modules', '.package-lock.json');
  if (installed === null) rmSync(record, { force: true });
  else writeFileSync(record, JSON.stringify({ packages: installed }));
  return arePackagesCurrent(project);
}

const a = { 'node_modules/a': { version: '1.0.0', integrity: 'sha512-a' } };

test('what the lock file asks for is current, with or without optional packages', () => {
  expect(isCurrentWith(a)).toBe(true);
  expect(isCurrentWith({ ...a, 'node_modules/for-another-system': { version: '2.0.0' } })).toBe(true);
});

test.each([
  ['nothing is installed, or an install was cut off', null],
  ['a package is missing', {}],
  ['a package has another version', { 'node_modules/a': { version: '1.0.1', integrity: 'sha512-a' } }],
  ['a package has other content', { 'node_modules/a': { version: '1.0.0', integrity: 'sha512-b' } }],
  ['a package is left over', { ...a, 'node_modules/b': { version: '1.0.0' } }],
])('%s: stale', (_what, installed) => {
  expect(isCurrentWith(installed)).toBe(false);
});
