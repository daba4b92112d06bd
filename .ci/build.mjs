// Client by Vite to dist/client; server and its worker by esbuild to dist/server.
import { build as bundle } from 'esbuild';
import { build as buildClient } from 'vite';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './steps.mjs';

process.env.NODE_ENV = 'production';
await buildClient({ root, configFile: join(root, 'vite.config.ts'), logLevel: 'warn' });

// Pure packages go into the bundle: one file is read at start instead of hundreds. The others bring native code, or find
// their own files at run time, and stay outside.
const inside = /^(zod|mathjs|ml-matrix|delaunator|robust-predicates|@kninnug\/constrainautor|@noble\/hashes|@stdlib\/|csv-parse|pngjs|clsx)/;
const { dependencies } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'));
const outside = Object.keys(dependencies).filter((name) => !inside.test(name)).flatMap((name) => [name, `${name}/*`]);
await bundle({
  absWorkingDir: root,
  entryPoints: { main: 'api/main.ts', worker: 'api/jobs/worker.ts' },
  outdir: 'dist/server',
  bundle: true, splitting: true, platform: 'node', format: 'esm', target: 'node20', external: outside, sourcemap: true, logLevel: 'warning',
  // Some packages inside are CommonJS and ask for Node's modules by require.
  banner: { js: "import { createRequire as hadamarkRequire } from 'node:module'; const require = hadamarkRequire(import.meta.url);" },
});
