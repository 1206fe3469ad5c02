/** Rooted trees and the order conditions they stand for.
 *  Source: Hairer, Norsett, Wanner, Solving Ordinary Differential Equations I, section II.2: a Runge-Kutta method has
 *  order p if and only if sum_j b_j Phi_j(tree) = 1 / gamma(tree) for every rooted tree of at most p nodes. */

export interface Tree {
  readonly nodes: number;
  readonly branches: readonly Tree[];
  readonly key: string;
}

/** All trees of exactly n nodes; 1, 1, 2, 4, 9, 20, 48, 115 of them for n = 1 to 8 (OEIS A000081). */
export function treesOf(n: number): Tree[] {
  if (n === 1) return [tree([])];
  const found = new Map<string, Tree>();
  for (let size = 1; size < n; size++) {
    for (const branch of treesOf(size)) {
      for (const rest of size === n - 1 ? [tree([])] : treesOf(n - size)) {
        const grown = tree([...rest.branches, branch]);
        found.set(grown.key, grown);
      }
    }
  }
  return [...found.values()];
}

/** gamma: number of nodes times the product over the branches. */
export function density({ nodes, branches }: Tree): number {
  return branches.reduce((product, branch) => product * density(branch), nodes);
}

/** Phi_j for every stage j of a method with matrix a. */
export function elementaryWeights({ branches }: Tree, a: readonly (readonly number[])[]): number[] {
  const ones = a.map(() => 1);
  return branches.reduce((product, branch) => {
    const inner = elementaryWeights(branch, a);
    return product.map((value, i) => value * a[i].reduce((sum, weight, j) => sum + weight * inner[j], 0));
  }, ones);
}

function tree(branches: readonly Tree[]): Tree {
  const sorted = [...branches].sort((a, b) => (a.key < b.key ? -1 : a.key > b.key ? 1 : 0));
  const nodes = 1 + sorted.reduce((sum, branch) => sum + branch.nodes, 0);
  return { nodes, branches: sorted, key: `(${sorted.map((branch) => branch.key).join('')})` };
}
