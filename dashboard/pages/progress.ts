import { html, type Part, type Safe } from '../html.js';
import { mayMove, type Moment } from '../live.js';
import { countText, durationText } from '../numbers.js';
import { partsOf } from '../parts.js';
import { shareHtml } from '../share.js';
import { verdictBar } from './verdict-bar.js';

/** Where a run stands: what the live updates replace. */
export function progressHtml(moment: Moment): Safe {
  const { run, chunks } = moment;
  const { counts } = run;
  return html`${verdictBar(counts, run.wanted)}
    <dl class="gauges">
      ${gauge('Points', countText(counts.points), `of ${countText(run.wanted)}`)}
      ${gauge('Surviving', shareHtml(counts.surviving, counts.points), survivingNote(moment), 'surviving')}
      ${gauge('Excluded', countText(counts.excluded), null, 'excluded')}
      ${gauge('Failed', countText(counts.failed), failedNote(moment), 'failed')}
      ${counts.unfinished > 0 && gauge('Unfinished', countText(counts.unfinished), 'no worker could do them', 'unfinished')}
      ${speed(moment)} ${gauge('Workers', countText(chunks.workers.length), retries(chunks.retried))}
    </dl>
    ${stillNote(moment)}`;
}

/** One sentence, announced to screen readers when it changes. */
export function stateSentence({ run }: Moment): string {
  switch (run.state) {
    case 'running':
      return 'The run is being computed.';
    case 'paused':
      return `The run is paused. Launching the same scan file again goes on with it.`;
    case 'cancelled':
      return 'The run was stopped. What was computed is kept; launching the same scan file again goes on with it.';
    case 'complete':
      return 'The run is complete.';
    case 'incomplete':
      return 'The run is over, but some points could not be computed by any worker: they are marked unfinished.';
  }
}

function gauge(name: string, value: Part, note: Part, colour = ''): Safe {
  return html`<div class="gauge ${colour && `gauge-${colour}`}">
    <dt>${name}</dt>
    <dd>${value}${note ? html`<span class="under">${note}</span>` : ''}</dd>
  </div>`;
}

function speed({ run, pointsPerSecond, secondsLeft }: Moment): Safe {
  if (!mayMove(run)) {
    const mean = run.seconds > 0 ? `${countText(run.counts.points / run.seconds)} points/s` : null;
    return gauge('Took', durationText(run.seconds), mean);
  }
  const left = secondsLeft === null ? 'time left not known yet' : `${durationText(secondsLeft)} left`;
  return gauge('Points per second', pointsPerSecond === null ? '–' : countText(pointsPerSecond), left);
}

/** Parts of a plan have ranges and priors of their own: their common share is one of points, not of any prior. */
function survivingNote({ run }: Moment): string {
  const parts = partsOf(run).length;
  const count = countText(run.counts.surviving);
  return parts > 1 ? `${count}, ${parts} parts of the plan together` : count;
}

function failedNote({ run }: Moment): string {
  return run.counts.failed > 0 ? 'results with a reason' : '';
}

function retries(count: number): string {
  if (count === 0) return 'no chunk retried';
  return count === 1 ? '1 chunk retried' : `${countText(count)} chunks retried`;
}

function stillNote({ stillSeconds }: Moment): Part {
  if (stillSeconds < 30) return '';
  return html`<p class="note">
    No point has arrived for ${durationText(stillSeconds)}. If the program that computes this run has ended,
    launching the same scan file again goes on where it stopped.
  </p>`;
}
