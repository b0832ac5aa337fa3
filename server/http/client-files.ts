import { existsSync } from 'node:fs';
import { join, resolve, sep } from 'node:path';
import express, { type RequestHandler, Router } from 'express';

const YEAR = 365 * 24 * 3600;
/** Vite names the files in here by their content. */
const HASHED = `${sep}assets${sep}`;

const NOT_BUILT = `<!doctype html>
<html lang="en">
<meta charset="utf-8">
<meta name="viewport" content="width=device-width">
<title>Yieldward: page not built</title>
<h1>The web page is not built</h1>
<p>The server runs and takes in data; its <a href="/api/openapi.json">API</a> answers.
Only the page is missing. Build it in the folder of Yieldward, then load this address again:</p>
<pre>npm run build</pre>
</html>
`;

/** A path that the page itself knows: asked for as a document, and not a file by its name. */
const isPageRoute = (accepted: string | false, path: string): boolean =>
  accepted === 'html' && !/\.[^/]*$/.test(path);

/** The built page: files named by content are kept for ever, all else is asked for anew. */
export const clientFiles = (folder: string): RequestHandler => {
  const root = resolve(folder);
  const router = Router();
  router.use(
    express.static(root, {
      setHeaders: (response, path) => {
        const hashed = path.slice(root.length).startsWith(HASHED);
        response.set('Cache-Control', hashed ? `public, max-age=${YEAR}, immutable` : 'no-cache');
      },
    }),
  );
  router.use((request, response, next) => {
    const reads = request.method === 'GET' || request.method === 'HEAD';
    if (!reads || !isPageRoute(request.accepts(['html', 'json']), request.path)) return next();
    response.set('Cache-Control', 'no-cache');
    if (existsSync(join(root, 'index.html'))) return response.sendFile('index.html', { root });
    response.status(503).type('html').send(NOT_BUILT);
  });
  return router;
};
