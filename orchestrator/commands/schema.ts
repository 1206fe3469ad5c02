import { scanSchema } from '../scan/schema.js';

/** JSON Schema of a scan file, for editors. */
export function schema(): object {
  return scanSchema();
}
