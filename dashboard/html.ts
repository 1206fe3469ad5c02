/** Text that is known to be safe inside an HTML or SVG document. */
export class Safe {
  constructor(readonly text: string) {}
  toString(): string {
    return this.text;
  }
}

export type Part = Safe | string | number | boolean | null | undefined | readonly Part[];

/** Builds a document from a template: everything put in is escaped unless it was built here or marked raw.
 *  Null, undefined, true and false leave nothing behind, so that conditions read `wanted && html...`. */
export function html(strings: TemplateStringsArray, ...parts: readonly Part[]): Safe {
  let text = strings[0];
  for (let i = 0; i < parts.length; i++) text += rendered(parts[i]) + strings[i + 1];
  return new Safe(text);
}

/** Marks text as safe: for the output of our own renderers only. */
export function raw(text: string): Safe {
  return new Safe(text);
}

export function escape(text: string): string {
  return text.replace(/[&<>"']/g, (character) => ENTITIES[character]);
}

const ENTITIES: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};

function rendered(part: Part): string {
  if (part instanceof Safe) return part.text;
  if (part === null || part === undefined || typeof part === 'boolean') return '';
  if (typeof part === 'string') return escape(part);
  if (typeof part === 'number') return String(part);
  return part.map(rendered).join('');
}
