import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const FLEET = fileURLToPath(new URL('programs/fleet.mjs', import.meta.url));

export interface FleetProcess {
  readonly process: ChildProcess;
  /** What it printed so far, both streams. */
  output(): string;
  /** Exit status, or the signal that ended it. */
  readonly exit: Promise<number | NodeJS.Signals>;
  end(signal: NodeJS.Signals): Promise<void>;
}

/** Starts a real worker process and waits until it takes chunks. */
export async function fleetProcess(url: string, options: object): Promise<FleetProcess> {
  const child = spawn(process.execPath, [FLEET, url, JSON.stringify(options)]);
  let text = '';
  const exit = once(child, 'exit').then(([status, signal]) => (status ?? signal) as number | NodeJS.Signals);
  const ready = new Promise<void>((resolve) => {
    const hear = (data: Buffer) => {
      text += data.toString();
      if (text.includes('takes chunks')) resolve();
    };
    child.stdout.on('data', hear);
    child.stderr.on('data', hear);
  });
  await Promise.race([
    ready,
    exit.then((status) => Promise.reject(new Error(`the worker ended with ${status}: ${text}`))),
  ]);
  return {
    process: child,
    output: () => text,
    exit,
    end: async (signal) => {
      child.kill(signal);
      await exit;
    },
  };
}
