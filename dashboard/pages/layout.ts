import { html, raw, type Part } from '../html.js';

export interface PageParts {
  readonly title: string;
  /** Where this page hangs: links from the runs list down to it. */
  readonly trail: readonly { readonly title: string; readonly address: string }[];
  readonly main: Part;
}

/** The frame of every page. Scripts come from this server only and serve live updates; all else works without. */
export function layout({ title, trail, main }: PageParts): string {
  return html`<!doctype html>
    <html lang="en">
      <head>
        <meta charset="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content="light dark" />
        <meta name="htmx-config" content="${HTMX_CONFIG}" />
        <title>${title} · Trigpoint</title>
        <link rel="icon" href="/assets/trigpoint.svg" type="image/svg+xml" />
        <link rel="stylesheet" href="/assets/style.css" />
        <script src="/assets/htmx.js" defer></script>
        <script src="/assets/sse.js" defer></script>
      </head>
      <body hx-ext="sse">
        <a class="skip" href="#main">Skip to the content</a>
        <header class="head">
          <a class="brand" href="/">${raw(MARK)}<span>Trigpoint</span></a>
          <nav aria-label="Where you are">
            <ol class="trail">
              ${trail.map((step) => html`<li><a href="${step.address}">${step.title}</a></li>`)}
            </ol>
          </nav>
        </header>
        <main id="main" tabindex="-1">${main}</main>
        <footer class="foot">
          <p>
            This page reads the store and changes nothing in it. Every number has its run, point and
            fingerprints.
          </p>
        </footer>
      </body>
    </html>`.text;
}

const HTMX_CONFIG = JSON.stringify({
  allowEval: false,
  includeIndicatorStyles: false,
  allowScriptTags: false,
  selfRequestsOnly: true,
  historyCacheSize: 0,
});

/** A surveyor's mark: a triangle around a fixed station. */
const MARK =
  '<svg class="mark" viewBox="0 0 24 24" aria-hidden="true"><path d="M12 3 22 20.5H2Z" fill="none" stroke="currentColor" stroke-width="1.6" stroke-linejoin="round"/><circle cx="12" cy="14.6" r="2.1" fill="currentColor"/></svg>';
