import { pathToFileURL } from 'node:url';

/** Raised when a message changes its meaning. */
const PROTOCOL = 1;

/** What the two ends of a fleet must agree on: messages and everything the workers compute with. */
export async function fleetCode(program: string): Promise<string> {
  const { codeFingerprint } = await import('../provenance/code.js'); // TODO static once the catalogue is there
  return `${PROTOCOL} ${codeFingerprint(pathToFileURL(program).href)}`;
}
