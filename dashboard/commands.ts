import type { Options, PointFacts } from '../orchestrator/commands/commands.js';
import type { View } from '../orchestrator/store/reading.js';

/** Everything the dashboard asks of the rest of the program besides reading the store.
 *  The shapes are those of the worker contract, so that models and constraints can be handed over as they are. */
export interface DashboardCommands {
  /** What the model and the constraints of a run are; undefined if there is no such run. */
  catalogue(run: number): Promise<Catalogue | undefined>;
  /** One stored point evaluated again from its stored inputs; undefined if the run has no such point. */
  pointFacts(run: number, stratum: number, index: number): Promise<StoredPoint | undefined>;
  /** What is wrong with a filter in the language of expressions, or null. Asked before every question. */
  checkFilter(run: number, where: string): Promise<FilterMistake | null>;
  /** Exactly what is filtered, RFC 4180, as the command `export` writes it. */
  csv(view: View, columns: readonly string[]): AsyncIterable<string>;
  /** The side file of that CSV: names, units, meanings and provenance, as JSON text. */
  csvDescription(view: View, columns: readonly string[]): Promise<string>;
  /** The provenance document of a run, as JSON text. */
  provenance(run: number): Promise<string>;
  /** Command lines that make this run again and check it, in order, each with what it does. */
  reproduce(run: number): Promise<readonly CommandLine[]>;
}

export interface CommandLine {
  readonly command: string;
  readonly does: string;
}

export interface FilterMistake {
  /** 0-based place in the text. */
  readonly position: number;
  readonly expected: string;
  readonly found: string;
  /** e.g. the nearest valid name. */
  readonly hint?: string;
}

export interface StoredPoint {
  readonly facts: PointFacts;
  /** The command line that evaluates this point, with every input. */
  readonly command: string;
  /** Names of stored columns that differ in any bit from the evaluation just made; empty if all agree. */
  readonly differing: readonly string[];
  readonly trace: CouplingTrace;
}

/** Running couplings along ascending scales: values[k][i] is coupling k at scales[i], null where running stopped. */
export interface CouplingTrace {
  /** GeV, from the start of the running to the cut-off, logarithmically spaced (some 60 of them). */
  readonly scales: readonly number[];
  readonly couplings: readonly QuantityInfo[];
  readonly values: readonly (readonly (number | null)[])[];
}

export interface SourceInfo {
  readonly text: string;
  readonly ref: string;
}

export interface QuantityInfo {
  readonly name: string;
  readonly unit: string;
  readonly symbol: string;
  readonly meaning: string;
  readonly absent?: string;
  readonly labels?: readonly string[];
  readonly caution?: string;
}

export interface InputInfo extends QuantityInfo {
  readonly default: number;
  readonly uncertainty: number | null;
  readonly nuisance: boolean;
  readonly source: SourceInfo;
}

export interface ConstraintInfo {
  readonly name: string;
  readonly title: string;
  /** As the plan uses it. */
  readonly uses: Options;
  readonly needs: readonly string[];
  readonly marginScale: string;
  readonly formula: string;
  readonly sources: readonly SourceInfo[];
  readonly validity: string;
  readonly neglects: string;
}

export interface Catalogue {
  readonly model: {
    readonly name: string;
    readonly title: string;
    readonly content: string;
    readonly sources: readonly SourceInfo[];
  };
  readonly inputs: readonly InputInfo[];
  /** Quantities as the modules give them, in the order of evaluation. */
  readonly modules: readonly { readonly name: string; readonly gives: readonly QuantityInfo[] }[];
  /** Constraints of the plan, deciding ones first, in its order. */
  readonly constraints: readonly ConstraintInfo[];
}
