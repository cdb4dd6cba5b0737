import { basename, join } from 'node:path';
import express, { Router } from 'express';

const FOR_EVER = 'public, max-age=31536000, immutable';

/** The built client: files whose names carry their content for ever, all else asked for anew; every other path is the app. */
export function staticClient(clientDir: string): Router {
  const router = Router();
  router.use(
    express.static(clientDir, {
      index: false,
      redirect: false,
      setHeaders: (res, file) => {
        const isNamedByContent = file.startsWith(join(clientDir, 'assets'));
        res.setHeader('Cache-Control', isNamedByContent ? FOR_EVER : 'no-cache');
      },
    }),
  );
  router.get('/{*path}', (req, res, next) => {
    // A file that is gone is gone: the app's page in its place would be run as a script.
    if (basename(req.path).includes('.')) return next();
    const options = { root: clientDir, headers: { 'Cache-Control': 'no-cache' } };
    res.sendFile('index.html', options, (error) => {
      if (error && !res.headersSent)
        res.status(404).type('text/plain').send('The pages have not been built: npm run build.');
    });
  });
  router.use((_req, res) => {
    res.status(404).type('text/plain').send('There is nothing at this address.');
  });
  return router;
}
