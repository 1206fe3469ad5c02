import { quote } from './phrases.js';

/** Keys and positions in lists that lead to a value. */
export type Path = readonly (string | number)[];

/** "vary.Mt.range[1]". */
export function pathText(path: Path): string {
  return path.reduce<string>((text, part) => {
    if (typeof part === 'number') return `${text}[${part}]`;
    if (!/^[\w-]{1,60}$/.test(part)) return `${text}[${quote(part)}]`;
    return text ? `${text}.${part}` : part;
  }, '');
}
