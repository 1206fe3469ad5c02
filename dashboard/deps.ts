import type { AsyncQuestions } from '../orchestrator/store/reading.js';
import type { DashboardCommands } from './commands.js';

/** What the dashboard is given: the store's read side, the commands, and how it is served. */
export interface DashboardDeps {
  readonly questions: AsyncQuestions;
  readonly commands: DashboardCommands;
  /** Names, besides those of this machine, under which the dashboard may be asked for. */
  readonly hosts?: readonly string[];
  /** Told of every unexpected error, which the reader of a page sees only in words. */
  readonly onError?: (error: unknown) => void;
  /** How often a watched run is looked at, in milliseconds. */
  readonly every?: number;
}
