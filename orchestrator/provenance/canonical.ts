import { createHash } from 'node:crypto';

/** The one text of a JSON value: keys in the order of their UTF-16 code units, no white space, numbers and
 *  strings as ECMAScript writes them.
 *  @throws TypeError for what JSON cannot say (NaN, infinities, undefined, functions, lone surrogates)
 *  Source: RFC 8785 (JSON Canonicalization Scheme), sections 3.2.2 and 3.2.3 */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`;
  if (typeof value === 'object' && value !== null) return canonicalObject(value);
  return canonicalScalar(value);
}

/** "sha256:<hex>" of the canonical JSON in UTF-8. */
export function fingerprint(value: unknown): string {
  return `sha256:${createHash('sha256').update(canonicalJson(value)).digest('hex')}`;
}

function canonicalObject(object: object): string {
  // The default sort compares UTF-16 code units, which is what RFC 8785 asks for. A member that is undefined
  // is left out, as JSON.stringify does.
  const members = Object.entries(object)
    .filter(([, value]) => value !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))
    .map(([key, value]) => `${canonicalScalar(key)}:${canonicalJson(value)}`);
  return `{${members.join(',')}}`;
}

function canonicalScalar(value: unknown): string {
  if (typeof value === 'string' && /\p{Cs}/u.test(value))
    throw new TypeError('lone surrogate in a JSON string');
  if (typeof value === 'number' && !Number.isFinite(value))
    throw new TypeError(`${value} is not a JSON number`);
  if (value === null || ['string', 'number', 'boolean'].includes(typeof value)) return JSON.stringify(value);
  throw new TypeError(`a JSON value cannot be of type ${typeof value}`);
}
