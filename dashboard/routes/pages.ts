import express, { type Request, type Router } from 'express';
import type { CheckFacts } from '../../orchestrator/commands/commands.js';
import type { RunRecord } from '../../orchestrator/store/records.js';
import type { DashboardDeps } from '../deps.js';
import { pointPage } from '../pages/point-page.js';
import { ROWS } from '../pages/results.js';
import { runPage } from '../pages/run-page.js';
import { runsPage } from '../pages/runs-page.js';
import { Refusal } from '../refusal.js';
import { inPart, partsOf } from '../parts.js';
import { numberIn, queryOf, runOf } from './request.js';
import { askedOf, figureFor } from './run-view.js';

export function pageRoutes(deps: DashboardDeps): Router {
  const router = express.Router();
  router.get('/', async (_request, response) => {
    response.type('html').send(runsPage(await deps.questions.runs()));
  });
  router.get('/runs', (_request, response) => response.redirect('/'));
  router.get('/runs/:run', async (request, response) => {
    const bare = queryOf(request).size === 0;
    const part = bare ? await firstPart(request, deps) : undefined;
    if (part !== undefined) return response.redirect(part);
    const { status, text } = await runPageOf(request, deps);
    response.status(status).type('html').send(text);
  });
  router.get('/runs/:run/points/:stratum/:index', async (request, response) => {
    response.type('html').send(await pointPageOf(request, deps));
  });
  return router;
}

/** Where a run page without a view leads: a plan in several parts shows its largest, for points of another slice of
 *  parameter space would blur the regions of the figure. */
async function firstPart(request: Request, { questions }: DashboardDeps): Promise<string | undefined> {
  const run = await runOf(request, questions);
  const [largest, ...others] = partsOf(run);
  if (others.length === 0) return undefined;
  return `/runs/${run.id}?${new URLSearchParams({ only: inPart(largest) }).toString()}`;
}

async function runPageOf(request: Request, deps: DashboardDeps): Promise<{ status: number; text: string }> {
  const { questions, commands } = deps;
  const asked = await askedOf(request, deps);
  const { run, columns, conditions, view, where, mistakes } = asked;
  const counts = await questions.counts({ run: run.id, where });
  const last = Math.max(1, Math.ceil(counts.points / ROWS));
  const offset = (Math.min(view.page, last) - 1) * ROWS;
  const [figure, page, cutFlow, chunks, catalogue, reproduce] = await Promise.all([
    figureFor(asked, counts, deps),
    questions.page({ run: run.id, where }, view.columns, offset, ROWS),
    questions.cutFlow({ run: run.id, where: '' }),
    questions.chunks(run.id),
    commands.catalogue(run.id),
    commands.reproduce(run.id),
  ]);
  const moment = { run, chunks, pointsPerSecond: null, secondsLeft: null, stillSeconds: 0 };
  const text = runPage({
    ...{
      run,
      columns,
      conditions,
      view,
      where,
      mistakes,
      counts,
      figure,
      page,
      cutFlow,
      chunks,
      catalogue,
      moment,
    },
    commands: reproduce,
  });
  return { status: mistakes.length > 0 ? 400 : 200, text };
}

async function pointPageOf(request: Request, { questions, commands }: DashboardDeps): Promise<string> {
  const run = await runOf(request, questions);
  const [stratum, index] = [numberIn(request, 'stratum'), numberIn(request, 'index')];
  const stored = await questions.point(run.id, stratum, index);
  if (!stored) throw noPoint(run, stratum, index);
  const [columns, constraints, catalogue, evaluated] = await Promise.all([
    questions.columns(run.id),
    questions.constraints(run.id),
    commands.catalogue(run.id),
    commands.pointFacts(run.id, stratum, index),
  ]);
  if (!evaluated) throw noPoint(run, stratum, index);
  const planned = pointsOf(run, stratum);
  return pointPage({
    ...{ run, stratum, index, stored, columns, constraints, catalogue, evaluated },
    previous: index > 0 ? index - 1 : null,
    next: index + 1 < planned ? index + 1 : null,
  });
}

function pointsOf(run: RunRecord, stratum: number): number {
  const plan = JSON.parse(run.plan) as CheckFacts['plan'];
  return plan.strata[stratum]?.points ?? 0;
}

function noPoint(run: RunRecord, stratum: number, index: number): Refusal {
  const planned = pointsOf(run, stratum);
  const explanation =
    index < planned
      ? `Point ${index} of stratum ${stratum} is planned but not stored yet.`
      : planned > 0
        ? `Stratum ${stratum} of run ${run.id} has the points 0 to ${planned - 1}; ${index} was asked.`
        : `Run ${run.id} has no stratum ${stratum}.`;
  return new Refusal(404, 'There is no such point', explanation);
}
