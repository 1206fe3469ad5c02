import { existsSync, renameSync, rmSync } from 'node:fs';
import { UserMistake } from '../mistakes.js';

/** Writes a file under a temporary name beside it and gives it its own only when it is whole.
 *  @throws UserMistake if the file exists */
export async function writeNewFile(file: string, write: (temporary: string) => Promise<void>): Promise<void> {
  if (existsSync(file)) {
    throw new UserMistake({
      where: file,
      expected: 'a file that does not exist yet',
      found: 'an existing one',
    });
  }
  const temporary = `${file}.${process.pid}.part`;
  try {
    await write(temporary);
    renameSync(temporary, file);
  } finally {
    rmSync(temporary, { force: true });
  }
}
