import { closeSync, fstatSync, openSync, readSync } from 'node:fs';
import { FileMistakes, UserMistake } from '../mistakes.js';
import { bytes } from './numbers.js';

/** More than any scan file needs: a larger one is refused before it costs memory. */
const MOST_BYTES = 16_000_000;

/** The bytes of a file that the user named.
 *  @throws UserMistake where it cannot be read or is no file, FileMistakes where it is too large */
export function readUserFile(path: string): Uint8Array {
  const file = openFile(path);
  try {
    const { size } = checked(path, file);
    const content = new Uint8Array(size);
    let read = 0;
    for (let n = -1; n !== 0 && read < content.length; read += n)
      n = readSync(file, content, read, size - read, null);
    return content.subarray(0, read);
  } finally {
    closeSync(file);
  }
}

function openFile(path: string): number {
  try {
    return openSync(path, 'r');
  } catch (error) {
    throw new UserMistake({ where: path, expected: 'a file that can be read', found: reason(error) });
  }
}

function checked(path: string, file: number) {
  const status = fstatSync(file);
  const found = !status.isFile() ? (status.isDirectory() ? 'a folder' : 'a device') : undefined;
  if (found) throw new UserMistake({ where: path, expected: 'a file', found });
  if (status.size <= MOST_BYTES) return status;
  const mistake = { expected: `at most ${bytes(MOST_BYTES)}`, found: bytes(status.size) };
  throw new FileMistakes(path, [{ line: 1, column: 1, path: '', ...mistake }]);
}

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EACCES: 'no right to read it',
  ENAMETOOLONG: 'a name that is too long',
  ENOTDIR: 'a path through something that is no folder',
};

function reason(error: unknown): string {
  const code = (error as NodeJS.ErrnoException).code ?? '';
  return REASONS[code] ?? `an error of the system, ${code}`;
}
