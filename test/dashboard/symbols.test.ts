import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseSymbol, symbolHtml, symbolText, unitHtml } from '../../dashboard/symbols.js';
import { tspans } from '../../dashboard/plots/label.js';

describe('symbols', () => {
  it.each([
    ['M_t', '<i>M</i><sub><i>t</i></sub>'],
    ["M_{Z'}", '<i>M</i><sub><i>Z</i></sub><sub>&#39;</sub>'],
    ['\\lambda_{\\mathrm{min}}', '<i>λ</i><sub>min</sub>'],
    ['\\log_{10} \\Lambda', 'log<sub>10</sub>Λ'],
    ['g_1^2', '<i>g</i><sub>1</sub><sup>2</sup>'],
    ['\\alpha_s(M_Z)', '<i>α</i><sub><i>s</i></sub>(<i>M</i><sub><i>Z</i></sub>)'],
    ['\\lambda > 0', '<i>λ</i> &gt; 0'],
    ['\\frac{a}{b+c}', '<i>a</i>/(<i>b</i> + <i>c</i>)'],
    ['\\sqrt{2}', '√2'],
    ['\\mathrm{margin}(\\mathrm{vacuum-stability})', 'margin(vacuum-stability)'],
    ['m^{-2}', '<i>m</i><sup>−2</sup>'],
  ])('%s', (tex, expected) => {
    expect(symbolHtml(tex).text).toBe(`<span class="math">${expected}</span>`);
  });

  it('raises the powers of units and prints nothing for pure numbers', () => {
    expect([
      unitHtml('GeV').text,
      unitHtml('GeV^2').text,
      unitHtml('GeV^-2').text,
      unitHtml('1').text,
    ]).toEqual(['GeV', 'GeV<sup>2</sup>', 'GeV<sup>−2</sup>', '']);
  });

  it('has a form in plain text', () => {
    expect(symbolText('\\lambda_{\\mathrm{eff}}^2')).toBe('λ_eff^2');
  });

  it('returns to the baseline in a drawing', () => {
    const moves = [...tspans(parseSymbol('g_1^2 x'), 20).matchAll(/dy="([-\d.]+)"/g)].map((one) =>
      Number(one[1]),
    );
    expect(moves.reduce((sum, dy) => sum + dy, 0)).toBeCloseTo(0, 9);
  });

  it('takes any text without throwing, and never makes markup of it', () => {
    fc.assert(
      fc.property(
        fc.string({ unit: fc.constantFrom('\\', '{', '}', '_', '^', 'frac', 'mathrm', '<', 'x', ' ') }),
        (tex) => {
          const text = symbolHtml(tex).text.replace(/<\/?(span|i|sub|sup)( class="math")?>/g, '');
          expect(text).not.toContain('<');
        },
      ),
    );
  });
});
