import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { html, raw } from '../../dashboard/html.js';

describe('html', () => {
  it('escapes what is put in, wherever it stands', () => {
    const evil = `"><script>alert('1' & 2)</script>`;
    const escaped = '&quot;&gt;&lt;script&gt;alert(&#39;1&#39; &amp; 2)&lt;/script&gt;';
    expect(html`<a title="${evil}">${evil}</a>`.text).toBe(`<a title="${escaped}">${escaped}</a>`);
  });

  it('keeps what was built by itself or marked raw', () => {
    expect(html`<p>${html`<b>${'<'}</b>`}${raw('<hr>')}</p>`.text).toBe('<p><b>&lt;</b><hr></p>');
  });

  it('joins lists and leaves nothing behind for conditions that do not hold', () => {
    const shown = (yes: boolean) => yes && html`<i>${0}</i>`;
    expect(html`${[1, 'a', [html`<b></b>`]]}|${null}${undefined}${shown(false)}|${shown(true)}`.text).toBe(
      '1a<b></b>||<i>0</i>',
    );
  });

  it('never lets any text open a tag or leave an attribute', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (text) => {
        expect(html`${text}`.text).not.toMatch(/[<>"']/);
      }),
    );
  });
});
