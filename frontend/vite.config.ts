import { fileURLToPath } from 'node:url';
import tailwind from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defaultClientConditions, defineConfig } from 'vite';

const here = (path: string): string => fileURLToPath(new URL(path, import.meta.url));
const server = `http://127.0.0.1:${process.env['PORT'] ?? '4180'}`;

export default defineConfig({
  root: here('.'),
  plugins: [react(), tailwind()],
  // `source` makes `#shared/*` the TypeScript that the server runs, not a build of it.
  resolve: { conditions: ['source', ...defaultClientConditions] },
  build: {
    outDir: here('../dist/frontend'),
    emptyOutDir: true,
    // The content security policy allows no data: address for scripts or faces, so nothing is inlined.
    assetsInlineLimit: 0,
  },
  worker: { format: 'es' },
  server: {
    port: Number(process.env['VITE_PORT'] ?? 5310),
    strictPort: true,
    fs: { allow: [here('..')] },
    proxy: { '/api': { target: server, changeOrigin: false } },
  },
});
