import { cleanup, configure } from '@testing-library/react';
import { afterAll, afterEach, beforeAll, vi } from 'vitest';
import { changeLanguage, i18n, startI18n } from '#src/i18n.ts';

// Runs for every file of the client's tests, which share a page and the modules that are loaded once.

// A loaded machine takes its time; a test is not about how long a page takes to appear.
configure({ asyncUtilTimeout: 10_000 });

beforeAll(async () => {
  if (i18n.isInitialized) await changeLanguage('en');
  else await startI18n();
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

/** What a browser keeps, and what hangs on the page besides what is rendered: the next file finds none of it. */
afterAll(() => {
  vi.useRealTimers();
  localStorage.clear();
  sessionStorage.clear();
  for (const cookie of document.cookie.split('; '))
    document.cookie = `${cookie.split('=')[0] ?? ''}=; Path=/; Max-Age=0`;
  document.head.innerHTML = '';
  document.body.innerHTML = '';
  document.title = '';
  history.replaceState(null, '', '/');
});
