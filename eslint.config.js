import { readdirSync } from 'node:fs';
import js from '@eslint/js';
import reactHooks from 'eslint-plugin-react-hooks';
import globals from 'globals';
import tseslint from 'typescript-eslint';

const listFolders = (path) =>
  readdirSync(new URL(path, import.meta.url), { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name);

/** Folders of server/ that are no capability: the engine, the demo and what starts or calls the product. */
const supportingFolders = new Set(['stats', 'demo', 'setup', 'commands']);
const capabilities = listFolders('server').filter((name) => !supportingFolders.has(name));
const features = listFolders('src/features');

const everywhere = [
  { regex: '^\\.\\.(/|$)', message: 'Import by #folder/… instead of ../' },
  {
    regex: '^(\\.|#)(?!.*\\.(ts|tsx|mjs|json|css|svg)$)',
    message: 'Name the file with its extension; there are no index files.',
  },
];
const notTests = { regex: '^#tests/', message: 'The product does not import its tests.' };
const notServer = {
  regex: '^#(server|drizzle)/',
  message: 'Client and shared code know nothing of the server.',
};
const notClient = { regex: '^#src/', message: 'The server knows nothing of the client.' };
/** Pages of the client that a capability renders itself, each by one front door. */
const renderedPages = {
  'grower-copy': 'features/grower-copy/render-copy-page.ts',
  'client-page': 'features/weigh-up/render-first-view.ts',
};
const notClientBut = (page) =>
  page === undefined
    ? notClient
    : {
        regex: `^#src/(?!${page.replaceAll('.', '\\.')}$)`,
        message: `Of the client this capability renders one page, by ${page}.`,
      };

/**
 * Who may import what. Made from the list of folders, so that a new capability or feature is guarded without a new
 * line. A later entry replaces an earlier one for the files of both.
 */
const importRules = [
  { folders: ['.'], forbidden: [] },
  { folders: ['server', 'drizzle'], forbidden: [notTests, notClient] },
  { folders: ['src'], forbidden: [notTests, notServer] },
  {
    folders: ['shared'],
    forbidden: [{ regex: '^(?!\\./|#shared/|zod$)', message: 'shared imports zod and itself.' }],
  },
  {
    folders: ['drizzle/schema'],
    forbidden: [
      {
        regex: '^(?!\\./|#drizzle/schema/|drizzle-orm)',
        message: 'The schema imports drizzle-orm and itself.',
      },
    ],
  },
  {
    folders: ['server/stats'],
    forbidden: [
      { regex: '^(?!\\./|#server/stats/|jstat$)', message: 'The engine imports jstat and itself.' },
    ],
  },
  ...capabilities.map((name) => ({
    folders: [`server/${name}`],
    forbidden: [
      notTests,
      notClientBut(renderedPages[name]),
      {
        regex: '^#server/stats/(?!engine\\.ts$)',
        message: 'The engine is entered by its front door, engine.ts.',
      },
      {
        regex: `^#server/(?!${name}/)[^/]+/.*-routes\\.ts$`,
        message: "A capability uses another one's store, never its routes.",
      },
      { regex: '^#server/(demo|setup|commands)/', message: 'A capability does not import what calls it.' },
    ],
  })),
  {
    folders: ['src/components'],
    forbidden: [
      notTests,
      notServer,
      {
        regex: '^#(src/(?!components/)|locales/)',
        message: 'Components import React, themselves and shared.',
      },
      {
        regex: '^@tanstack/react-query',
        message: 'Components show what they are given; features ask the server.',
      },
    ],
  },
  ...features.map((name) => ({
    folders: [`src/features/${name}`],
    forbidden: [
      notTests,
      notServer,
      { regex: `^#src/features/(?!${name}/)`, message: 'A feature does not import another feature.' },
    ],
  })),
];

/** Besides the rules of imports: what no file may contain, and what JSX may not. */
const noDefaultExport = {
  selector: 'ExportDefaultDeclaration',
  message: 'Export by name, so that a thing is called the same everywhere.',
};
const readAttributes =
  /^(title|alt|placeholder|label|aria-label|aria-description|aria-roledescription|ariaLabel)$/;
const noLiteralText = [
  // The product's name is the same in every language.
  'JSXText[value=/^(?!\\s*Gavelrow\\s*$).*\\p{L}/su]',
  ':matches(JSXElement, JSXFragment) > JSXExpressionContainer > Literal[value=/\\p{L}/u]',
  `JSXAttribute[name.name=${readAttributes}] > Literal[value=/\\p{L}/u]`,
  `JSXAttribute[name.name=${readAttributes}] > JSXExpressionContainer > Literal[value=/\\p{L}/u]`,
  `JSXAttribute[name.name=${readAttributes}] > JSXExpressionContainer > TemplateLiteral > TemplateElement[value.raw=/\\p{L}/u]`,
].map((selector) => ({ selector, message: 'Text that a person reads stands in locales/.' }));

/** Static imports and re-exports are the first rule's; `import('…')` is the second's. */
function restrictImports({ folders, forbidden }) {
  const patterns = [...everywhere, ...forbidden];
  const dynamic = patterns.map(({ regex, message }) => ({
    selector: `ImportExpression > Literal[value=/${regex.replaceAll('/', '\\/')}/]`,
    message,
  }));
  const jsxText = folders.every((folder) => folder.startsWith('src')) ? noLiteralText : [];
  return {
    files: folders.map((folder) => `${folder === '.' ? '' : `${folder}/`}**/*.{ts,tsx,js,mjs}`),
    rules: {
      'no-restricted-imports': ['error', { patterns }],
      'no-restricted-syntax': ['error', noDefaultExport, ...dynamic, ...jsxText],
    },
  };
}

/** Rules that need types, or compile each component, cost most of the time: `npm test` asks for them, the fast loop does not. */
const withTypes = process.env.LINT_WITH_TYPES === '1';
const allReactRules = reactHooks.configs.flat.recommended.rules;
const quickReactRules = ['react-hooks/rules-of-hooks', 'react-hooks/exhaustive-deps'];
const reactRules = withTypes
  ? allReactRules
  : Object.fromEntries(quickReactRules.map((name) => [name, allReactRules[name]]));
const typedRules = {
  '@typescript-eslint/await-thenable': 'error',
  '@typescript-eslint/no-floating-promises': 'error',
  '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
  '@typescript-eslint/only-throw-error': 'error',
  '@typescript-eslint/switch-exhaustiveness-check': ['error', { considerDefaultExhaustiveForUnions: true }],
};
/** Tests read replies of the API as they come, untyped. */
const noUntypedValues = Object.fromEntries(
  ['argument', 'assignment', 'call', 'member-access', 'return'].map((what) => [
    `@typescript-eslint/no-unsafe-${what}`,
    'error',
  ]),
);

export default tseslint.config(
  { ignores: ['dist', '.local', 'coverage', 'test-results', 'drizzle/migrations'] },
  js.configs.recommended,
  tseslint.configs.recommended,
  {
    linterOptions: { reportUnusedDisableDirectives: withTypes ? 'error' : 'off' },
    languageOptions: { globals: globals.nodeBuiltin },
    rules: {
      eqeqeq: ['error', 'always', { null: 'ignore' }],
      'max-lines': ['error', 450],
      'no-restricted-exports': ['error', { restrictDefaultExports: { named: true } }],
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
    },
  },
  {
    files: ['src/**', 'tests/client/**'],
    plugins: { 'react-hooks': reactHooks },
    languageOptions: { globals: globals.browser },
    rules: reactRules,
  },
  ...importRules.map(restrictImports),
  { files: ['*.config.{ts,js}'], rules: { 'no-restricted-syntax': 'off' } },
  {
    // Published coefficients keep the digits of their source.
    files: ['server/stats/**', 'tests/{stats,reference}/**', 'shared/**'],
    rules: { 'no-loss-of-precision': 'off' },
  },
  {
    files: ['**/*.{ts,tsx}'],
    // The compiler finds undefined names, and knows the types' ones too; unused ones in the fast loop.
    rules: { 'no-undef': 'off', ...(withTypes ? {} : { '@typescript-eslint/no-unused-vars': 'off' }) },
  },
  ...(withTypes
    ? [
        {
          files: ['**/*.{ts,tsx}'],
          ignores: ['**/*.d.mts'],
          plugins: { '@typescript-eslint': tseslint.plugin },
          languageOptions: {
            parserOptions: {
              // The client's first: the server's program knows its .tsx files by their types alone.
              project: ['./tsconfig.client.json', './tsconfig.server.json'],
              tsconfigRootDir: import.meta.dirname,
            },
          },
          rules: typedRules,
        },
        { files: ['{server,shared,src,drizzle}/**/*.{ts,tsx}'], rules: noUntypedValues },
      ]
    : []),
);
