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
      input: [`${copyPage}/start-copy-page.tsx`, `${copyPage}/copy-page.css`, 'src/fonts.css'],
    },
  },
};

const apiServer = { target: `http://127.0.0.1:${process.env['API_PORT'] ?? '3001'}`, changeOrigin: false };

const application: UserConfig = {
  plugins: [react(), tailwindcss()],
  build,
  // `npm run dev` says where its API listens; that server also renders the pages of grower copies.
  server: { proxy: { '/api': apiServer, '/copy/': apiServer } },
};

export default defineConfig(({ mode }) => (mode === 'copy' ? copyBuild : application));
