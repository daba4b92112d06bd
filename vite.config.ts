import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

/** The API of `npm run dev` listens here; the page comes from Vite and asks it through the proxy. */
const api = `http://127.0.0.1:${process.env.API_PORT ?? process.env.PORT ?? '3000'}`;

export default defineConfig({
  root: '.',
  plugins: [react(), tailwindcss()],
  // No data: addresses: the content policy allows files of this site only.
  build: { outDir: 'dist/client', emptyOutDir: true, sourcemap: true, target: 'es2022', assetsInlineLimit: 0 },
  worker: { format: 'es' },
  server: {
    proxy: {
      '/api/v1': { target: api, changeOrigin: false },
      '/auth': { target: api, changeOrigin: false },
      '/local-github': { target: api, changeOrigin: false },
    },
  },
});
