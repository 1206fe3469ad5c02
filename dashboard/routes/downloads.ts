import express, { type Request, type Response, type Router } from 'express';
import type { DashboardDeps } from '../deps.js';
import { captionLines } from '../pages/results.js';
import { NARROW, WIDE } from '../plots/drawing.js';
import { Refusal } from '../refusal.js';
import { queryOf, runOf } from './request.js';
import { askedOf, figureFor, type Asked } from './run-view.js';

export function downloadRoutes(deps: DashboardDeps): Router {
  const { questions, commands } = deps;
  const router = express.Router();
  router.get('/runs/:run/figure.svg', async (request, response) => {
    response.type('svg').send(await figureFile(request, deps));
  });
  router.get('/runs/:run/points.csv', async (request, response) => {
    const asked = await askedWell(request, deps);
    const columns = asked.columns.map((column) => column.name);
    response.type('csv');
    if (request.method === 'HEAD') return void response.end();
    await streamText(response, commands.csv({ run: asked.run.id, where: asked.where }, columns));
  });
  router.get('/runs/:run/points.csv-metadata.json', async (request, response) => {
    const asked = await askedWell(request, deps);
    const columns = asked.columns.map((column) => column.name);
    const text = await commands.csvDescription({ run: asked.run.id, where: asked.where }, columns);
    response.type('json').send(text);
  });
  router.get('/runs/:run/provenance.json', async (request, response) => {
    const run = await runOf(request, questions);
    response.type('json').send(await commands.provenance(run.id));
  });
  router.get('/runs/:run/scan-file', async (request, response) => {
    const run = await runOf(request, questions);
    response.type('text/plain').send(run.scanFile.text);
  });
  return router;
}

async function figureFile(request: Request, deps: DashboardDeps): Promise<string> {
  const asked = await askedWell(request, deps);
  const counts = await deps.questions.counts({ run: asked.run.id, where: asked.where });
  const figure = await figureFor(asked, counts, deps);
  if (!figure)
    throw new Refusal(404, 'There is nothing to draw', 'No point of this view has a value on both axes.');
  const size = queryOf(request).get('size') === 'narrow' ? NARROW : WIDE;
  const notes = captionLines({ run: asked.run, where: asked.where, counts, figure });
  return figure.draw({ size, notes, summary: figure.summary, place: 'file' });
}

/** A file cannot say beside a field what is wrong with it: it is refused whole. */
async function askedWell(request: Request, deps: DashboardDeps): Promise<Asked> {
  const asked = await askedOf(request, deps);
  const [mistake] = asked.mistakes;
  if (!mistake) return asked;
  const place = mistake.position === undefined ? '' : ` at character ${mistake.position + 1}`;
  throw new Refusal(
    400,
    'This view cannot be read',
    `In “${mistake.field}”${place}: expected ${mistake.expected}, found ${mistake.found}.`,
  );
}

/** Writes as fast as the reader reads; a reader who leaves ends the work, an error cuts the connection so that half
 *  a file is not taken for a whole one. */
async function streamText(response: Response, parts: AsyncIterable<string>): Promise<void> {
  const gone = new Promise((resolve) => response.once('close', resolve));
  try {
    for await (const part of parts) {
      if (response.destroyed) return;
      if (!response.write(part)) await Promise.race([drained(response), gone]);
    }
    response.end();
  } catch (error) {
    if (response.headersSent) response.destroy();
    throw error;
  }
}

function drained(response: Response): Promise<unknown> {
  return new Promise((resolve) => response.once('drain', resolve));
}
