import { FileMistakes } from '../../../orchestrator/mistakes.js';
import { readScan } from '../../../orchestrator/scan/read-scan.js';

/** What is said about a scan file, a line a mistake; none for a good one. Anything but FileMistakes is passed on. */
export function mistakesOf(file: string | Uint8Array): string[] {
  const bytes = typeof file === 'string' ? new TextEncoder().encode(file) : file;
  try {
    readScan(bytes, 'f');
    return [];
  } catch (error) {
    if (error instanceof FileMistakes) return error.message.split('\n');
    throw error;
  }
}
