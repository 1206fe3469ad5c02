#!/usr/bin/env node
import { availableParallelism } from 'node:os';
import { dashboardCommands } from './commands/for-dashboard.js';
import { runProgram } from './terminal/program.js';

/** The only reader of argv and environment, and the only one who knows the dashboard. */
await runProgram(process.argv.slice(2), {
  out: process.stdout,
  err: process.stderr,
  redis: process.env.REDIS_URL || undefined,
  debug: Boolean(process.env.TRIGPOINT_DEBUG),
  cores: availableParallelism(),
  async serveDashboard({ questions, store }, { port, host }) {
    // Loaded only where it is wanted: most commands never open it.
    const { serve } = await import('../dashboard/serve.js');
    const onError = (error: unknown) => {
      const text = error instanceof Error ? (error.stack ?? error.message) : String(error);
      process.stderr.write(`a page could not be made: ${text}\n`);
    };
    return serve({ questions, commands: dashboardCommands(questions, store), onError }, port, host);
  },
});
