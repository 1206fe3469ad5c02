import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import express, { type Router } from 'express';

/** Style, icon and the two scripts, read once: they are small and part of this version. */
export function assetRoutes(): Router {
  const router = express.Router();
  for (const { address, type, paths } of ASSETS) {
    const body = Buffer.concat(paths.map((path) => readFileSync(path)));
    router.get(address, (_request, response) => {
      response.type(type).setHeader('Cache-Control', 'no-cache');
      response.send(body);
    });
  }
  return router;
}

const packages = createRequire(import.meta.url);

const own = (name: string): URL => new URL(`./assets/${name}`, import.meta.url);

/** Parts of the one style sheet, in this order. */
const STYLE = ['base', 'sheets', 'tables', 'view', 'facts', 'plots'];

const ASSETS = [
  { address: '/assets/style.css', type: 'css', paths: STYLE.map((part) => own(`style/${part}.css`)) },
  { address: '/assets/trigpoint.svg', type: 'svg', paths: [own('trigpoint.svg')] },
  { address: '/assets/htmx.js', type: 'js', paths: [packages.resolve('htmx.org/dist/htmx.min.js')] },
  { address: '/assets/sse.js', type: 'js', paths: [packages.resolve('htmx-ext-sse/dist/sse.min.js')] },
];
