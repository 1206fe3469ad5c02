import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import helmet from 'helmet';
import { assetRoutes } from './assets.js';
import type { DashboardDeps } from './deps.js';
import { guard } from './guard.js';
import { createLiveRuns, type LiveRuns } from './live.js';
import { troublePage } from './pages/trouble-page.js';
import { Refusal } from './refusal.js';
import { downloadRoutes } from './routes/downloads.js';
import { liveRoutes } from './routes/live.js';
import { pageRoutes } from './routes/pages.js';

/** The dashboard as an Express application. `live` is to be closed with the server. */
export function createApp(deps: DashboardDeps): Express & { readonly live: LiveRuns } {
  const app = express();
  const live = createLiveRuns(deps.questions, deps.every);
  app.disable('x-powered-by');
  app.set('query parser', false);
  app.use(headers(), guard(deps.hosts ?? []));
  app.use(assetRoutes(), pageRoutes(deps), liveRoutes(live, deps), downloadRoutes(deps));
  app.use(() => {
    throw new Refusal(
      404,
      'There is no such page',
      'The address may be mistyped, or belong to another store.',
    );
  });
  app.use(troubleHandler(deps));
  return Object.assign(app, { live });
}

/** Nothing is loaded but from here, nothing inline runs, nobody may frame a page. Plain http on this machine needs
 *  no HSTS, which would break other programs on the same name. */
function headers(): ReturnType<typeof helmet> {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        'default-src': ["'none'"],
        'script-src': ["'self'"],
        'style-src': ["'self'"],
        'img-src': ["'self'", 'data:'],
        'connect-src': ["'self'"],
        'form-action': ["'self'"],
        'base-uri': ["'none'"],
        'frame-ancestors': ["'none'"],
      },
    },
    strictTransportSecurity: false,
    referrerPolicy: { policy: 'no-referrer' },
  });
}

function troubleHandler({ onError }: DashboardDeps) {
  return (error: unknown, _request: Request, response: Response, next: NextFunction): void => {
    const trouble = inWords(error);
    if (trouble.status >= 500) onError?.(error);
    if (response.headersSent) return next(error);
    response.status(trouble.status).type('html').send(troublePage(trouble));
  };
}

function inWords(error: unknown): { status: number; title: string; explanation: string } {
  if (error instanceof Refusal) return error;
  if (error instanceof URIError || isClientError(error)) {
    return { status: 400, title: 'This address cannot be read', explanation: 'It is not well formed.' };
  }
  const known = error instanceof Error && 'exit' in error && typeof error.exit === 'number';
  return {
    status: 500,
    title: 'The page could not be made',
    explanation: known
      ? `${error.message}.`
      : 'Something unexpected happened while the store was read; the terminal that serves this page says more.',
  };
}

function isClientError(error: unknown): boolean {
  const status = error instanceof Error && 'status' in error ? error.status : undefined;
  return typeof status === 'number' && status >= 400 && status < 500;
}
