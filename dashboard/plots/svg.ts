export type Attributes = Readonly<Record<string, string | number | undefined>>;

/** One SVG element as text. Attributes that are undefined are left out; children are finished SVG text. */
export function element(name: string, attributes: Attributes, ...children: readonly string[]): string {
  let text = `<${name}`;
  for (const [key, value] of Object.entries(attributes)) {
    if (value === undefined) continue;
    text += ` ${key}="${typeof value === 'number' ? round(value) : escapeText(value)}"`;
  }
  const inside = children.join('');
  return inside === '' ? `${text}/>` : `${text}>${inside}</${name}>`;
}

export function escapeText(text: string): string {
  return text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;');
}

/** A coordinate with two decimals at most: a hundredth of a pixel is more than a page shows. */
export function round(value: number): string {
  const rounded = Math.round(value * 100) / 100;
  return String(rounded === 0 ? 0 : rounded);
}
