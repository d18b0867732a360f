import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

export default defineConfig({
  plugins: [react(), tailwindcss()],
  build: {
    outDir: 'dist/client',
    manifest: true,
    // Assets stay files however small: the content security policy allows data: addresses for images alone.
    assetsInlineLimit: 0,
  },
  server: {
    // `npm run dev` says where its API listens.
    proxy: {
      '/api': { target: `http://127.0.0.1:${process.env['API_PORT'] ?? '3001'}`, changeOrigin: false },
    },
  },
});
