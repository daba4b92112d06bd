// Client by Vite to dist/client; server and its worker by esbuild to dist/server, packages left outside.
import { build as bundle } from 'esbuild';
import { build as buildClient } from 'vite';
import { join } from 'node:path';
import { root } from './steps.mjs';

process.env.NODE_ENV = 'production';
await buildClient({ root, configFile: join(root, 'vite.config.ts'), logLevel: 'warn' });
await bundle({
  absWorkingDir: root,
  entryPoints: { main: 'api/main.ts', worker: 'api/jobs/worker.ts' },
  outdir: 'dist/server',
  bundle: true, platform: 'node', format: 'esm', target: 'node20', packages: 'external', sourcemap: true, logLevel: 'warning',
});
