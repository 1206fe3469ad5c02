import express, { type Request, type Response, type Router } from 'express';
import type { DashboardDeps } from '../deps.js';
import { mayMove, type LiveRuns, type Moment } from '../live.js';
import { progressHtml, stateSentence } from '../pages/progress.js';
import { Refusal } from '../refusal.js';
import { runOf } from './request.js';

/** Progress as server-sent events (HTML Living Standard, section 9.2): `progress` and `state` carry markup, `stale`
 *  says that figure and tables are behind, `done` that nothing more will come. */
export function liveRoutes(live: LiveRuns, deps: DashboardDeps): Router {
  const router = express.Router();
  router.get('/runs/:run/live', async (request, response) => {
    const run = await runOf(request, deps.questions);
    if (live.listeners(run.id) >= MOST_LISTENERS) {
      throw new Refusal(
        503,
        'Too many pages watch this run',
        'Close some of them; the page itself can be reloaded.',
      );
    }
    stream(request, response, live, run.id);
  });
  return router;
}

/** Pages that may watch one run at once. */
const MOST_LISTENERS = 100;
/** Figure and tables are asked for again at most this often, in milliseconds. */
const STALE_EVERY = 4000;
const HEARTBEAT = 15_000;
/** A browser that lost the connection comes back after this many milliseconds. */
const RETRY = 2000;

function stream(request: Request, response: Response, live: LiveRuns, run: number): void {
  response.writeHead(200, {
    'Content-Type': 'text/event-stream; charset=utf-8',
    'Cache-Control': 'no-store',
    'X-Accel-Buffering': 'no',
  });
  if (request.method === 'HEAD') return void response.end();
  response.write(`retry: ${RETRY}\n\n`);
  const teller = new Teller(response);
  const heartbeat = setInterval(() => response.write(': still here\n\n'), HEARTBEAT);
  heartbeat.unref();
  let over = false;
  const end = (): void => {
    if (over) return;
    over = true;
    clearInterval(heartbeat);
    stop();
    response.end();
  };
  const stop = live.watch(
    run,
    (moment) => {
      if (over) return;
      teller.tell(moment);
      if (!mayMove(moment.run)) setImmediate(end);
    },
    end,
  );
  request.on('close', end);
}

class Teller {
  private state = '';
  private stalePoints = -1;
  private staleAt = performance.now();

  constructor(private readonly response: Response) {}

  tell(moment: Moment): void {
    this.send('progress', progressHtml(moment).text);
    const sentence = stateSentence(moment);
    if (sentence !== this.state) this.send('state', sentence);
    this.state = sentence;
    if (!mayMove(moment.run)) this.send('done', String(moment.run.counts.points));
    else this.tellStale(moment.run.counts.points);
  }

  private tellStale(points: number): void {
    if (this.stalePoints === -1) this.stalePoints = points;
    const now = performance.now();
    if (points === this.stalePoints || now - this.staleAt < STALE_EVERY) return;
    this.stalePoints = points;
    this.staleAt = now;
    this.send('stale', String(points));
  }

  private send(event: string, data: string): void {
    const lines = data.split('\n').map((line) => `data: ${line.trim()}`);
    this.response.write(`event: ${event}\n${lines.join('\n')}\n\n`);
  }
}
