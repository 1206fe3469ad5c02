import { request } from 'node:http';
import { dashboardCommands } from '../../orchestrator/commands/for-dashboard.js';
import { startReader } from '../../orchestrator/store/reader-thread.js';
import type { AsyncQuestions } from '../../orchestrator/store/reading.js';
import { serve } from '../../dashboard/serve.js';

/** The dashboard on a real store, made by the built program. */

export interface Dashboard {
  readonly address: string;
  readonly questions: AsyncQuestions;
  /** What was told to the terminal. */
  readonly errors: unknown[];
  close(): Promise<void>;
}

export async function dashboardOn(store: string, every?: number, port = 0): Promise<Dashboard> {
  const questions = startReader(store);
  const errors: unknown[] = [];
  const deps = {
    questions,
    commands: dashboardCommands(questions),
    onError: (e: unknown) => errors.push(e),
    every,
  };
  const served = await serve(deps, port);
  return {
    address: served.address,
    questions,
    errors,
    async close() {
      await served.close();
      await questions.close();
    },
  };
}

export interface Answer {
  readonly status: number;
  readonly headers: Readonly<Record<string, string | string[] | undefined>>;
  readonly text: string;
}

/** Asks with any header, which fetch does not allow. */
export function ask(
  address: string,
  path: string,
  options: { method?: string; headers?: Record<string, string> } = {},
): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const sent = request(`${address}${path}`, options, (response) => {
      let text = '';
      response.setEncoding('utf8').on('data', (piece: string) => (text += piece));
      response.on('end', () =>
        resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
      );
      response.on('error', reject);
    });
    sent.on('error', reject).end();
  });
}

/** A plane of masses in which all classes of vacuum occur; a title that must not become markup. */
export const SCAN = `title: "A plane <b>for</b> tests & 'others'"
model: sm
seed: dashboard
sample:
  - name: plane
    method: sobol
    points: 900
    vary:
      Mt: { range: [165, 185], unit: GeV }
      Mh: { range: [115, 135], unit: GeV }
  - name: measured
    method: sobol
    points: 100
    vary:
      Mt: { gaussian: [172.57, 0.29], unit: GeV }
require: [perturbativity, { vacuum-stability: { accept: metastable } }]
note: [measured-top-mass]
`;
