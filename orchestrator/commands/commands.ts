import type { Judgement, Options } from '../../workers/contract.js';
import type { Plan, Mistake } from '../scan/plan.js';
import type { Counts, RunRecord } from '../store/records.js';

/** What the command line and the dashboard both ask for. Every function returns facts; nobody prints here. */
export interface PointFacts {
  readonly format: 1;
  readonly model: string;
  /** Null where a definition that sets the input has no value at this point. */
  readonly inputs: Readonly<Record<string, { value: number | null; unit: string }>>;
  readonly couplings: readonly {
    scale: { value: number | null; unit: string };
    at: string;
    values: Readonly<Record<string, number | null>>;
  }[];
  readonly quantities: Readonly<
    Record<string, { value: number | null; unit: string; label?: string; absent?: string; caution?: string }>
  >;
  readonly constraints: Readonly<
    Record<
      string,
      {
        outcome: string;
        margin: number | null;
        logLikelihood: number | null;
        detail: string;
        deciding: boolean;
      }
    >
  >;
  readonly verdict: string;
  readonly reason: string | null;
  readonly fingerprint: string;
}

/** The short account of a run that launch, rerun, extend and show all give. */
export interface RunFacts extends Counts {
  readonly run: number;
  readonly state: string;
  readonly digest: string | null;
}

/** Lives while a run is being worked on; the dashboard and the progress bar listen. */
export interface Progress {
  readonly run: number;
  readonly state: string;
  readonly wanted: number;
  readonly counts: Counts;
  readonly pointsPerSecond: number;
  readonly secondsLeft: number | null;
  readonly retried: number;
  readonly workers: readonly { name: string; chunks: number; points: number }[];
}

export interface CheckFacts {
  readonly plan: Plan;
  readonly fingerprint: string;
  readonly points: number;
  readonly estimate: { readonly seconds: number; readonly bytes: number; readonly basis: string };
}

export type { Judgement, Options, Mistake, RunRecord };
