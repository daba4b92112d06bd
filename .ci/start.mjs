// npm start: install if needed, build if needed, then the server (which migrates and seeds once).
import { join } from 'node:path';
import { buildIfNeeded, installIfNeeded, root, serve } from './steps.mjs';

installIfNeeded();
buildIfNeeded();
serve(process.execPath, ['--enable-source-maps', join(root, 'dist', 'server', 'main.js')]);
