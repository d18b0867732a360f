import { ESLint } from 'eslint';
import { beforeAll, describe, expect, test } from 'vitest';

let lint: (path: string, code: string) => Promise<string[]>;

beforeAll(() => {
  const eslint = new ESLint();
  lint = async (path, code) => {
    const [result] = await eslint.lintText(code, { filePath: path });
    return (result?.messages ?? []).map((message) => message.ruleId ?? message.message);
  };
});

/** A file that is not there, and what it may not import. */
const violations = [
  ['shared/sample.ts', 'pg'],
  ['shared/sample.ts', '#server/db.ts'],
  ['shared/sample.ts', '#src/paths.ts'],
  ['drizzle/schema/sample.ts', 'zod'],
  ['drizzle/schema/sample.ts', '#server/db.ts'],
  ['server/stats/sample.ts', 'express'],
  ['server/stats/sample.ts', '#shared/money.ts'],
  ['server/stats/trial/sample.ts', '#server/db.ts'],
  ['server/weigh-up/sample.ts', '#server/trials/trial-routes.ts'],
  ['server/weigh-up/sample.ts', '#server/stats/trial/anova.ts'],
  ['server/weigh-up/sample.ts', '#src/paths.ts'],
  ['server/trials/sample.ts', '#src/features/grower-copy/render-copy-page.ts'],
  ['server/grower-copy/sample.ts', '#src/features/grower-copy/copy-page.tsx'],
  ['server/trials/sample.ts', '#server/demo/seed-demo.ts'],
  ['server/sample.ts', '#src/paths.ts'],
  ['server/sample.ts', '#tests/support/test-database.ts'],
  ['src/components/sample.tsx', '#src/api-client.ts'],
  ['src/components/sample.tsx', '#src/features/sign-in/sign-in-form.tsx'],
  ['src/components/sample.tsx', '@tanstack/react-query'],
  ['src/features/sign-in/sample.tsx', '#src/features/weigh-up/weigh-up-page.tsx'],
  ['src/features/sign-in/sample.tsx', '#server/db.ts'],
  ['src/sample.ts', '#drizzle/schema/trials.ts'],
  ['src/components/sample.tsx', '../paths.ts'],
  ['server/sample.ts', './db'],
  ['server/sample.ts', '#shared/money'],
] as const;

/** What the same files may import, so that a rule that forbids everything is noticed as well. */
const allowed = [
  ['shared/sample.ts', 'zod'],
  ['shared/sample.ts', './money.ts'],
  ['drizzle/schema/sample.ts', 'drizzle-orm/pg-core'],
  ['server/stats/trial/sample.ts', '#server/stats/linear/dense.ts'],
  ['server/stats/sample.ts', 'jstat'],
  ['server/weigh-up/sample.ts', '#server/stats/engine.ts'],
  ['server/weigh-up/sample.ts', '#server/trials/trial-store.ts'],
  ['server/weigh-up/sample.ts', '#drizzle/schema/weigh-ups.ts'],
  ['server/grower-copy/sample.ts', '#src/features/grower-copy/render-copy-page.ts'],
  ['src/components/sample.tsx', '#shared/verdict.ts'],
  ['src/features/sign-in/sample.tsx', '#src/components/field.tsx'],
  ['src/features/sign-in/sample.tsx', '#src/api-client.ts'],
] as const;

describe('import rules', () => {
  test.each(violations)('%s may not import %s', async (path, source) => {
    expect(await lint(path, `import '${source}';\n`)).toContain('no-restricted-imports');
    expect(await lint(path, `await import('${source}');\n`)).toContain('no-restricted-syntax');
  });

  test.each(allowed)('%s may import %s', async (path, source) => {
    expect(await lint(path, `import '${source}';\n`)).toEqual([]);
    expect(await lint(path, `await import('${source}');\n`)).toEqual([]);
  });
});

describe('other rules', () => {
  test.each([
    ['text', 'export const Sample = () => <p>Not settled</p>;'],
    ['text in braces', "export const Sample = () => <p>{'Not settled'}</p>;"],
    ['an attribute that is read', 'export const Sample = () => <input placeholder="Variety" />;'],
    ['an attribute made from a template', 'export const Sample = () => <img alt={`Map of ${1}`} />;'],
  ])('JSX with literal %s is refused', async (_what, code) => {
    expect(await lint('src/sample.tsx', `${code}\n`)).toEqual(['no-restricted-syntax']);
  });

  test('JSX with translated text, classes and signs passes', async () => {
    const code =
      "export const Sample = () => <p className=\"lead\" title={t('trial.title')}>{t('trial.text')} · 1</p>;";
    expect(await lint('src/sample.tsx', `${code}\n`)).toEqual([]);
  });

  test('a default export is refused outside a config', async () => {
    expect(await lint('server/sample.ts', 'export default 1;\n')).toContain('no-restricted-syntax');
    expect(await lint('sample.config.ts', 'export default 1;\n')).toEqual([]);
  });
});
