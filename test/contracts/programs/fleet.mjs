// A fleet worker as `npx trigpoint worker` runs it, but with a worker program of the tests:
// node fleet.mjs URL '{"threads":2,...}'
import { runFleetWorker } from '../../../dist/orchestrator/dispatch/fleet-worker.js';

const [url, options] = process.argv.slice(2);
const stop = new AbortController();
process.on('SIGTERM', () => stop.abort());
try {
  await runFleetWorker(url, {
    ...JSON.parse(options),
    signal: stop.signal,
    say: (line) => console.log(line),
  });
} catch (error) {
  console.error(error.message);
  process.exitCode = 3;
}
