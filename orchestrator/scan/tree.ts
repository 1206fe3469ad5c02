import { isAlias, isMap, isScalar, isSeq, LineCounter, parseDocument, type Node, type Pair } from 'yaml';
import { FileMistakes } from '../mistakes.js';
import type { Complaint, Mistake } from './plan.js';
import { describe, quote } from './phrases.js';
import { inOrder } from './order.js';
import { pathText, type Path } from './path.js';

interface Place {
  readonly line: number;
  readonly column: number;
}

/** A YAML document as plain values that remember where they stand. */
export interface Tree {
  readonly value: unknown;
  placeOf(path: Path, offset?: number): Place;
  placeOfKey(path: Path): Place;
  /** What the user typed for a value, e.g. 1e400 where the value is infinity. */
  sourceOf(path: Path): string;
  /** Duplicate keys, aliases, tags and the like: mistakes that leave the rest readable. */
  readonly mistakes: readonly Mistake[];
}

const DEEPEST = 12;

/** Reads YAML 1.2 (of which JSON is a part) without its ways of building more than is written.
 *  @throws FileMistakes if the text is not YAML at all */
export function readTree(text: string, file: string): Tree {
  const lines = new LineCounter();
  const options = { prettyErrors: false, uniqueKeys: false, logLevel: 'error' } as const;
  const document = parseDocument(text, { lineCounter: lines, ...options });
  const place = (offset: number): Place => {
    const { line, col } = lines.linePos(Math.min(offset, text.length));
    return { line: Math.max(line, 1), column: Math.max(col, 1) };
  };
  const broken = document.errors.map(({ code, message, pos }) => ({
    ...place(pos[0]),
    path: '',
    ...syntaxComplaint(code, message, text.slice(...pos)),
  }));
  if (broken.length > 0) throw new FileMistakes(file, inOrder(broken));
  const builder = new Builder(text, place);
  const directives = document.directives;
  if (directives.yaml.explicit || Object.keys(directives.tags).length > 1) {
    builder.complain(0, [], 'no directives', 'a % line');
  }
  const value = document.contents === null ? undefined : builder.build(document.contents, [], 0);
  return { value, ...builder.places(), mistakes: builder.mistakes };
}

function syntaxComplaint(code: string, message: string, found: string): Complaint {
  if (code === 'MULTIPLE_DOCS')
    return { expected: 'one document', found: 'several, separated by "---" or "..."' };
  if (message.includes('call stack'))
    return { expected: `at most ${DEEPEST} levels`, found: 'a far deeper one' };
  const first = found.split('\n')[0].trim();
  const hint = message.slice(0, 120).replace(/^./, (letter) => letter.toLowerCase());
  return { expected: 'valid YAML', found: first ? quote(first) : 'something else', hint };
}

class Builder {
  readonly mistakes: Mistake[] = [];
  private readonly values = new Map<string, Node>();
  private readonly keys = new Map<string, number>();

  constructor(
    private readonly text: string,
    private readonly place: (offset: number) => Place,
  ) {}

  complain(offset: number, path: Path, expected: string, found: string, hint?: string): undefined {
    this.mistakes.push({
      ...this.place(offset),
      path: pathText(path),
      expected,
      found,
      ...(hint ? { hint } : {}),
    });
  }

  build(node: Node, path: Path, depth: number): unknown {
    const start = node.range?.[0] ?? 0;
    this.values.set(idOf(path), node);
    if (isAlias(node)) return this.complain(start, path, 'the value itself', `an alias, *${node.source}`);
    if (node.anchor) this.complain(start, path, 'no anchors', `&${node.anchor}`);
    if (node.tag) this.complain(start, path, 'plain values without tags', quote(node.tag));
    if (depth > DEEPEST) return this.complain(start, path, `at most ${DEEPEST} levels`, 'a deeper one');
    if (isScalar(node)) return node.value;
    if (isSeq(node)) return node.items.map((item, i) => this.build(item as Node, [...path, i], depth + 1));
    return isMap(node) ? this.buildMap(node.items as Pair<Node, Node | null>[], path, depth) : undefined;
  }

  private buildMap(pairs: Pair<Node, Node | null>[], path: Path, depth: number): Record<string, unknown> {
    const entries = new Map<string, unknown>();
    for (const pair of pairs) {
      const name = this.nameOf(pair.key, path);
      if (name === undefined) continue;
      const inner = [...path, name];
      const start = pair.key.range?.[0] ?? 0;
      if (entries.has(name)) {
        this.complain(start, inner, 'every key once', `a second ${quote(name)}`);
        continue;
      }
      this.keys.set(idOf(inner), start);
      entries.set(name, pair.value ? this.build(pair.value, inner, depth + 1) : null);
    }
    return Object.fromEntries(entries);
  }

  /** Keys are text: the name of an input, an option and so on. */
  private nameOf(key: Node, path: Path): string | undefined {
    const start = key.range?.[0] ?? 0;
    if (isAlias(key) || key.anchor || key.tag)
      return this.complain(start, path, 'a plain key', 'an alias, anchor or tag');
    if (!isScalar(key)) return this.complain(start, path, 'a name as key', 'a list or mapping as key');
    if (typeof key.value !== 'string')
      return this.complain(start, path, 'a name as key', describe(key.value));
    if (key.value === '__proto__') return this.complain(start, path, 'a known key', '"__proto__"');
    return key.value;
  }

  places(): Pick<Tree, 'placeOf' | 'placeOfKey' | 'sourceOf'> {
    return {
      placeOf: (path, offset) => this.place(this.insideScalar(path, offset) ?? this.nearest(path)),
      placeOfKey: (path) => this.place(this.keys.get(idOf(path)) ?? this.nearest(path)),
      sourceOf: (path) => this.source(this.values.get(idOf(path))),
    };
  }

  /** Start of the value at a path, else of the key of the innermost part of the path that exists. */
  private nearest(path: Path): number {
    const whole = this.startOf(path);
    if (whole !== undefined) return whole;
    for (let length = path.length - 1; length > 0; length--) {
      const outer = path.slice(0, length);
      const at = this.keys.get(idOf(outer)) ?? this.startOf(outer);
      if (at !== undefined) return at;
    }
    return this.startOf([]) ?? 0;
  }

  private startOf(path: Path): number | undefined {
    return this.values.get(idOf(path))?.range?.[0];
  }

  private source(node: Node | undefined): string {
    return node?.range ? this.text.slice(node.range[0], node.range[1]) : '';
  }

  /** Offset in the file of a character of a scalar, where the file shows the scalar as it is. */
  private insideScalar(path: Path, offset: number | undefined): number | undefined {
    if (offset === undefined) return undefined;
    const node = this.values.get(idOf(path));
    if (!isScalar(node) || typeof node.value !== 'string' || !node.range) return undefined;
    const at = this.source(node).indexOf(node.value);
    return at < 0 ? undefined : node.range[0] + at + offset;
  }
}

function idOf(path: Path): string {
  return JSON.stringify(path);
}
