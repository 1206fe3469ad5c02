/** Columns aligned with spaces: numbers to the right, text to the left. Two spaces between columns. */
export function table(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const lines = head.length > 0 ? [head, ...rows] : rows;
  const widths = columnWidths(lines);
  const right = widths.map((_, i) => rows.length > 0 && rows.every((row) => isNumber(row[i] ?? '')));
  return lines
    .map((line) =>
      line
        .map((cell, i) => (right[i] ? cell.padStart(widths[i]) : cell.padEnd(widths[i])))
        .join('  ')
        .trimEnd(),
    )
    .join('\n');
}

function columnWidths(lines: readonly (readonly string[])[]): number[] {
  const widths: number[] = [];
  for (const line of lines)
    line.forEach((cell, i) => {
      widths[i] = Math.max(widths[i] ?? 0, cell.length);
    });
  return widths;
}

function isNumber(cell: string): boolean {
  return /^(-|[-+]?[\d,.]+(e[-+]?\d+)?( %)?)?$/.test(cell);
}
