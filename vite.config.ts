import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig, type BuildOptions, type UserConfig } from 'vite';

const copyPage = 'src/features/grower-copy';

// Assets stay files however small: the content security policy allows data: addresses for images alone.
const build: BuildOptions = { outDir: 'dist/client', manifest: true, assetsInlineLimit: 0 };

/** `vite build --mode copy`, after the application's own build: style and script of the grower copy beside it. */
const copyBuild: UserConfig = {
  plugins: [react(), tailwindcss()],
  resolve: {
    alias: {
      // The libraries would not fit into what a phone on a field gets; see light-i18next.ts.
      i18next: `/${copyPage}/light-i18next.ts`,
      'react-i18next': `/${copyPage}/light-react-i18next.tsx`,
    },
  },
  build: {
    ...build,
    emptyOutDir: false,
    manifest: '.vite/copy-manifest.json',
    modulePreload: false,
    rollupOptions: {
      input: [
        `${copyPage}/start-copy-page.tsx`,
        `${copyPage}/copy-page.css`,
        'src/fonts.css',
        'src/start-after-paint.ts',
        'src/features/weigh-up/first-view.css',
      ],
    },
  },
};

const apiServer = { target: `http://127.0.0.1:${process.env['API_PORT'] ?? '3001'}`, changeOrigin: false };

/**
 * A line of 400 ms to a plain HTTP/1.1 server carries six files at a time: dozens of small ones are rounds of waiting. So
 * what every page needs is one file, what only one page needs another, and what pages share is in very few.
 */
const fewFiles = {
  groups: [
    // The entry stays a file of its own: what it names in the manifest is how the page is found.
    { name: 'base', tags: ['$initial' as const], test: (id: string) => !/(index\.html|main\.tsx)$/.test(id) },
    {
      name: 'shared',
      test: /\/(src|shared|node_modules)\//,
      minShareCount: 2,
      entriesAware: true,
      entriesAwareMergeThreshold: 200_000,
    },
  ],
};

/** A shared file is otherwise called by all the pages that share it. */
const nameFile = ({ name }: { name: string }): string => `assets/${name.split('~')[0] ?? name}-[hash].js`;

const application: UserConfig = {
  plugins: [react(), tailwindcss()],
  build: {
    ...build,
    rolldownOptions: {
      // Files that share modules import each other in circles: without it the first page opened decides what runs first.
      output: { codeSplitting: fewFiles, chunkFileNames: nameFile, strictExecutionOrder: true },
    },
  },
  // `npm run dev` says where its API listens; that server also renders the pages of grower copies.
  server: { proxy: { '/api': apiServer, '/copy/': apiServer } },
};

export default defineConfig(({ mode }) => (mode === 'copy' ? copyBuild : application));
