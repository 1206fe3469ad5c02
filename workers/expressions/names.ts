import type { Expression } from './syntax.js';

/** Keys of the columns an expression reads, each with the position in the text where it stands first. */
export function namesOf(expression: Expression): Map<string, number> {
  const names = new Map<string, number>();
  collect(expression, names);
  return names;
}

function collect(node: Expression, names: Map<string, number>): void {
  switch (node.kind) {
    case 'number':
      return;
    case 'column':
      if (!names.has(node.key)) names.set(node.key, node.position);
      return;
    case 'unary':
      return collect(node.operand, names);
    case 'binary':
      collect(node.left, names);
      return collect(node.right, names);
    case 'chain':
      return node.operands.forEach((operand) => collect(operand, names));
    case 'call':
      return node.arguments.forEach((argument) => collect(argument, names));
  }
}
