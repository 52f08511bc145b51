import path from 'node:path';
import express, { Router } from 'express';

/** The built client: hashed assets for ever, everything else asked for again; unknown pages get the application. */
export function staticFiles(folder: string): Router {
  const router = Router();
  router.use(
    '/assets',
    express.static(path.join(folder, 'assets'), { immutable: true, maxAge: '365d', index: false }),
    // A missing asset is missing: the application in its place would only fail later.
    (_request, response) => void response.status(404).type('text/plain').send('There is no such file.'),
  );
  router.use(
    express.static(folder, {
      index: false,
      setHeaders: (response) => void response.setHeader('cache-control', 'no-cache'),
    }),
  );
  router.get('/{*page}', (_request, response) => {
    response.set('cache-control', 'no-cache').sendFile(path.join(folder, 'index.html'));
  });
  return router;
}
