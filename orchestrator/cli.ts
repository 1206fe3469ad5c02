#!/usr/bin/env node
import { availableParallelism } from 'node:os';
import { serve } from '../dashboard/serve.js';
import { dashboardCommands } from './commands/for-dashboard.js';
import { runProgram } from './terminal/program.js';

/** The only reader of argv and environment, and the only one who knows the dashboard. */
await runProgram(process.argv.slice(2), {
  out: process.stdout,
  err: process.stderr,
  redis: process.env.REDIS_URL || undefined,
  debug: Boolean(process.env.TRIGPOINT_DEBUG),
  cores: availableParallelism(),
  serveDashboard: (questions, { port, host }) =>
    serve({ questions, commands: dashboardCommands(questions) }, port, host),
});
