import { FileMistakes } from '../mistakes.js';

/** A scan file is written by hand: a larger one is refused before anything reads it. */
export const LARGEST_FILE = 256 * 1024;

/** The bytes of a scan file as text.
 *  @throws FileMistakes if it is too large, not UTF-8 or has control characters */
export function decode(bytes: Uint8Array, file: string): string {
  if (bytes.length > LARGEST_FILE)
    refuse(file, 0, 0, `at most ${LARGEST_FILE} bytes`, `${bytes.length} bytes`);
  const good = validPrefix(bytes);
  const text = new TextDecoder('utf-8').decode(bytes.subarray(0, good));
  if (good < bytes.length) {
    const byte = bytes[good].toString(16).padStart(2, '0');
    refuse(file, ...lineAndColumn(text, text.length), 'text in UTF-8', `the byte 0x${byte}`);
  }
  const control = text.search(CONTROL);
  if (control >= 0) {
    const code = text.charCodeAt(control).toString(16).padStart(4, '0');
    refuse(
      file,
      ...lineAndColumn(text, control),
      'printable text',
      `the control character U+${code.toUpperCase()}`,
    );
  }
  return text;
}

const CONTROL = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f]/;

/** 1-based line and column of an offset in a text. */
export function lineAndColumn(text: string, offset: number): [number, number] {
  const before = text.slice(0, offset);
  const line = before.split('\n').length;
  return [line, offset - before.lastIndexOf('\n')];
}

/** Length of the longest beginning that is whole UTF-8 characters. */
function validPrefix(bytes: Uint8Array): number {
  if (isValid(bytes, false)) return bytes.length;
  let good = 0;
  let bad = bytes.length;
  while (bad - good > 1) {
    const middle = (good + bad) >>> 1;
    if (isValid(bytes.subarray(0, middle), true)) good = middle;
    else bad = middle;
  }
  while (!isValid(bytes.subarray(0, good), false)) good--;
  return good;
}

/** @param cut whether the bytes may end within a character */
function isValid(bytes: Uint8Array, cut: boolean): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(bytes, { stream: cut });
    return true;
  } catch (error) {
    if (error instanceof TypeError) return false;
    throw error;
  }
}

function refuse(file: string, line: number, column: number, expected: string, found: string): never {
  throw new FileMistakes(file, [{ line, column, path: '', expected, found }]);
}
