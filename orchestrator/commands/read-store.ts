import { existsSync } from 'node:fs';
import { UserMistake } from '../mistakes.js';
import { openForReading } from '../store/open.js';
import type { Reading } from '../store/reading.js';

/** Where runs are kept unless somebody says otherwise. */
export const USUAL_STORE = './trigpoint.sqlite';

/** Opens a store to read for as long as an answer takes.
 *  @throws UserMistake where there is no such file */
export async function withReading<T>(path: string, ask: (reading: Reading) => T | Promise<T>): Promise<T> {
  mustExist(path);
  const reading = openForReading(path);
  try {
    return await ask(reading);
  } finally {
    reading.close();
  }
}

export function mustExist(path: string): void {
  if (existsSync(path)) return;
  throw new UserMistake({
    where: '--store',
    expected: 'a store, which launching a scan file makes',
    found: `no file ${path}`,
  });
}
