import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';

/** A real process under test, and what it said. */
export interface Program {
  readonly pid: number;
  out(): string;
  err(): string;
  /** Exit status, or the signal that ended it. */
  readonly exit: Promise<number | NodeJS.Signals>;
  signal(signal: NodeJS.Signals): void;
  /** Resolves once the output of both streams matches.
   *  @throws Error if the process ends first */
  says(pattern: RegExp): Promise<void>;
}

const alive = new Set<ChildProcess>();

export function program(args: readonly string[], env: NodeJS.ProcessEnv = {}): Program {
  const child = spawn(process.execPath, args, { env: { ...process.env, ...env } });
  alive.add(child);
  const heard = { out: '', err: '' };
  let wake: () => void = () => undefined;
  child.stdout.on('data', (data: Buffer) => {
    heard.out += data.toString();
    wake();
  });
  child.stderr.on('data', (data: Buffer) => {
    heard.err += data.toString();
    wake();
  });
  let ended = false;
  const exit = once(child, 'close').then(([status, signal]) => {
    alive.delete(child);
    ended = true;
    wake();
    return (status ?? signal) as number | NodeJS.Signals;
  });
  return {
    pid: child.pid ?? 0,
    out: () => heard.out,
    err: () => heard.err,
    exit,
    signal: (signal) => void child.kill(signal),
    async says(pattern) {
      while (!pattern.test(heard.out + heard.err)) {
        if (ended) throw new Error(`ended without saying ${pattern}:\n${heard.out}${heard.err}`);
        await new Promise<void>((resolve) => (wake = resolve));
      }
    },
  };
}

/** Ends what a test that failed left behind. */
export async function endPrograms(): Promise<void> {
  const gone = [...alive].map((child) => once(child, 'close'));
  for (const child of alive) child.kill('SIGKILL');
  await Promise.all(gone);
}
