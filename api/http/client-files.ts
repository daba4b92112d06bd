import { existsSync } from 'node:fs';
import path from 'node:path';
import express, { Router } from 'express';

const hint = 'The client is not built. Run npm run build, or npm run dev and open the address it prints.\n';

/** The built client, and its page for every address the client's own router knows. */
export function clientFiles(clientDir: string): Router {
  const router = Router();
  const page = path.join(clientDir, 'index.html');
  if (!existsSync(page)) {
    router.get('/{*rest}', (_req, res) => {
      res.status(503).type('text/plain').send(hint);
    });
    return router;
  }
  // The bundler puts a hash of the content into these names.
  router.use('/assets', express.static(path.join(clientDir, 'assets'), { immutable: true, maxAge: '1y', index: false, fallthrough: false }));
  router.use(express.static(clientDir, { index: false, maxAge: 0, setHeaders: (res) => res.setHeader('Cache-Control', 'no-cache') }));
  router.get('/{*rest}', (_req, res) => {
    res.set('Cache-Control', 'no-cache').sendFile(page);
  });
  return router;
}
