/** A reader of CSV written from the grammar of RFC 4180, section 2, for tests: strict, throws on anything else. */
export function parseCsv(text: string): string[][] {
  const records: string[][] = [[]];
  const field = /"((?:[^"]|"")*)"|([^",\r\n]*)/y;
  for (let at = 0; at < text.length;) {
    field.lastIndex = at;
    const match = field.exec(text)!;
    records.at(-1)!.push(match[1] === undefined ? match[2] : match[1].replaceAll('""', '"'));
    at = field.lastIndex;
    if (text.startsWith('\r\n', at)) {
      at += 2;
      if (at < text.length) records.push([]);
    } else if (text[at] === ',') {
      at += 1;
    } else {
      throw new Error(`not RFC 4180 at ${at}: ${JSON.stringify(text.slice(at, at + 20))}`);
    }
  }
  return records;
}
