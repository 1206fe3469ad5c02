import { describe } from 'vitest';
import { openThreads } from '../../orchestrator/dispatch/threads.js';
import { dispatcherContract, PROGRAM, type Limits } from './dispatcher-contract.js';

describe('worker threads', () => {
  dispatcherContract((limits: Limits) =>
    Promise.resolve({
      open: openThreads(limits.threads, { program: PROGRAM, ...limits }),
      stop: () => Promise.resolve(),
    }),
  );
});
