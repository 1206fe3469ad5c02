import { pathToFileURL } from 'node:url';
import { codeFingerprint } from '../provenance/code.js';

/** Raised when a message changes its meaning. */
const PROTOCOL = 1;

/** What the two ends of a fleet must agree on: messages and everything the workers compute with. */
export function fleetCode(program: string): string {
  return `${PROTOCOL} ${codeFingerprint(pathToFileURL(program).href)}`;
}
