import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import express, { type Router } from 'express';

/** Style, icon and the two scripts, read once: they are small and part of this version. */
export function assetRoutes(): Router {
  const router = express.Router();
  for (const { address, type, path } of ASSETS) {
    const body = readFileSync(path);
    router.get(address, (_request, response) => {
      response.type(type).setHeader('Cache-Control', 'no-cache');
      response.send(body);
    });
  }
  return router;
}

const packages = createRequire(import.meta.url);

const ASSETS = [
  { address: '/assets/style.css', type: 'css', path: new URL('./assets/style.css', import.meta.url) },
  { address: '/assets/trigpoint.svg', type: 'svg', path: new URL('./assets/trigpoint.svg', import.meta.url) },
  { address: '/assets/htmx.js', type: 'js', path: packages.resolve('htmx.org/dist/htmx.min.js') },
  { address: '/assets/sse.js', type: 'js', path: packages.resolve('htmx-ext-sse/dist/sse.min.js') },
];
