import { connectForReading, connectForWriting } from './connect.js';
import type { Connection } from './connect.js';
import { takeLease } from './lease.js';
import { readingOf } from './read.js';
import type { Reading } from './reading.js';
import { settle } from './settle.js';
import { onStore } from './sqlite-trouble.js';
import { writingOf } from './write.js';
import type { Writing } from './writing.js';

/** Opens a store to write, making it if there is none, and takes its lease.
 *  @throws Broken, with nothing changed, where the store is damaged, of a newer format or in use */
export function openForWriting(path: string): Writing {
  const db = connectForWriting(path);
  try {
    return writingOf(
      path,
      db,
      onStore(path, () => takeLease(path, db)),
    );
  } catch (error) {
    db.close();
    throw error;
  }
}

/** Opens a store to read, on a connection of its own.
 *  @throws Broken where there is no store or it cannot be read */
export function openForReading(path: string): Reading {
  const db: Connection = connectForReading(path);
  const reading = readingOf(path, db);
  return {
    ...reading,
    close() {
      if (!db.open) return;
      reading.close();
      settle(path);
    },
  };
}
