import { canonicalJson } from '../provenance/canonical.js';
import { bytesOf, sha256 } from './bytes.js';
import type { Extents } from './extents.js';
import { BLOCK, columnsOf, EVALUATION, JUDGEMENT } from './layout.js';
import type { Kind, Layout } from './layout.js';
import { joinPieces } from './pieces.js';
import { pieceOf } from './place.js';
import type { Shelf } from './place.js';
import type { Segments } from './segments.js';
import type { Span } from './writing.js';

/** The digest of a run: the fingerprint of its results and of nothing else. No clock, worker, attempt, chunk or
 *  layout of segments enters it. It can be computed again from an export of all columns:
 *
 *  1. Columns in this order: the inputs that the plan varies in any stratum, sorted by name; the kept quantities
 *     and definitions in the order of `keep` in the plan; `failure`; for every constraint of `require`, then of
 *     `note`, in the order of the plan: `outcome(NAME)`, `margin(NAME)`, `likelihood(NAME)`; `verdict`.
 *  2. Every stratum is cut into blocks of 4096 consecutive indices, the last one shorter.
 *  3. Column hash: SHA-256 of the column's values in a block. `failure`, `outcome(...)` and `verdict` are a byte
 *     a point, their index in FAILURES, OUTCOMES, VERDICTS; all others are float64 little-endian, where an absent
 *     value is the NaN 0x7ff8000000000000 and -0 keeps its sign.
 *  4. Block hash: SHA-256 of the column hashes (32 bytes each) one after the other.
 *  5. Stratum hash: SHA-256 of its block hashes one after the other.
 *  6. Digest: "sha256:" and the hexadecimal SHA-256 of the RFC 8785 canonical JSON, in UTF-8, of
 *     { "columns": [names in the order above], "format": 1, "strata": [{ "hash": hex, "points": n }, ...] }.
 *
 *  @param onBlock called after every block, so that a long computation can show that it is alive
 *  All points must be committed. Blocks that are one segment are not read: the hashes of their columns were taken
 *  from the bytes when they were written, and `verifyIntegrity` compares the two. */
export function digestOf(source: DigestSource, onBlock: () => void): string {
  const columns = [...columnsOf(source.layout, EVALUATION), ...columnsOf(source.layout, JUDGEMENT)];
  const strata = source.layout.strata.map((points, stratum) => ({
    points,
    hash: sha256(...blockHashes(source, stratum, points, onBlock)).toString('hex'),
  }));
  return `sha256:${sha256(canonicalJson({ format: 1, columns, strata })).toString('hex')}`;
}

export interface DigestSource {
  readonly run: number;
  readonly layout: Layout;
  readonly segments: Segments;
  readonly extents: Extents;
}

function blockHashes(source: DigestSource, stratum: number, points: number, onBlock: () => void): Buffer[] {
  const hashes: Buffer[] = [];
  for (let first = 0; first < points; first += BLOCK) {
    const block = { stratum, first, count: Math.min(BLOCK, points - first) };
    hashes.push(
      sha256(...columnHashes(source, EVALUATION, block), ...columnHashes(source, JUDGEMENT, block)),
    );
    onBlock();
  }
  return hashes;
}

function columnHashes(source: DigestSource, kind: Kind, block: Span): Buffer[] {
  const shelf: Shelf = { ...source, kind };
  const names = columnsOf(source.layout, kind);
  const extents = source.extents.overlapping(source.run, kind, block);
  const only = extents.length === 1 && extents[0].length === block.count ? extents[0].segment : undefined;
  const stored = only === undefined ? [] : names.map((name) => source.segments.hash(only, name));
  if (only !== undefined && stored.every((hash) => hash !== undefined)) return stored;
  const piece = joinPieces(extents.map((extent) => pieceOf(shelf, extent)));
  return names.map((name) => sha256(bytesOf(piece.columns.get(name)!)));
}
