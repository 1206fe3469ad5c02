import type { SourceInfo } from '../commands.js';
import { html, type Part, type Safe } from '../html.js';

/** Where a number or formula comes from, with a link where the reference says how to find it. */
export function sourceHtml(source: SourceInfo): Safe {
  return html`${source.text}${source.ref !== '' && html`, ${reference(source.ref)}`}`;
}

function reference(ref: string): Part {
  const arxiv = /^arXiv:(\d{4}\.\d{4,5}|[a-z-]+\/\d{7})$/.exec(ref);
  if (arxiv) return link(`https://arxiv.org/abs/${arxiv[1]}`, ref);
  const older = /^[a-z-]+\/\d{7}$/.exec(ref);
  if (older) return link(`https://arxiv.org/abs/${ref}`, ref);
  const doi = /^(?:doi:|https:\/\/doi\.org\/)?(10\.\d{4,9}\/\S+)$/.exec(ref);
  return doi ? link(`https://doi.org/${encodeURI(doi[1])}`, ref) : ref;
}

function link(address: string, title: string): Safe {
  return html`<a href="${address}" rel="noreferrer">${title}</a>`;
}
