import { FileMistakes } from '../mistakes.js';
import { inOrder } from './order.js';
import { pathText, type Path } from './path.js';
import { describe } from './phrases.js';
import type { Complaint, Mistake } from './plan.js';
import type { Tree } from './tree.js';

/** Collects every mistake of one file with its place. */
export class Report {
  private readonly mistakes: Mistake[] = [];
  private readonly known: ReadonlySet<string>;

  constructor(
    private readonly file: string,
    private readonly tree: Tree,
  ) {
    this.mistakes.push(...tree.mistakes);
    this.known = new Set(tree.mistakes.map(({ path }) => path).filter((path) => path !== ''));
  }

  /** What the tree already complained about is not complained about again. */
  private push(path: Path, mistake: Mistake): void {
    if (!this.known.has(pathText(path))) this.mistakes.push(mistake);
  }

  /** A mistake in the value at a path; where the path does not exist, at the nearest part that does.
   *  @param offset characters into the text of the value, e.g. the place in an expression; else its beginning */
  value(path: Path, complaint: Complaint, offset?: number): void {
    this.push(path, { ...this.tree.placeOf(path, offset), path: pathText(path), ...complaint });
  }

  /** A mistake in the key at a path. */
  key(path: Path, complaint: Complaint): void {
    this.push(path, { ...this.tree.placeOfKey(path), path: pathText(path), ...complaint });
  }

  /** What a mistake says was found: the value in words, or what was typed where that says more. */
  describe(path: Path, value: unknown): string {
    if (typeof value === 'number' && !Number.isFinite(value))
      return `${describe(value)} (${this.tree.sourceOf(path)})`;
    return describe(value);
  }

  get clean(): boolean {
    return this.mistakes.length === 0;
  }

  /** Throws all mistakes in the order of the file, if there are any. */
  throwIfAny(): void {
    if (!this.clean) throw new FileMistakes(this.file, inOrder(this.mistakes));
  }
}
