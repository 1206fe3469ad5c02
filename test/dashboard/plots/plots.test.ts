import { describe, expect, it } from 'vitest';
import type { Axis } from '../../../dashboard/plots/axis.js';
import { COUNTS_LABEL, densityPlot } from '../../../dashboard/plots/density.js';
import { NARROW, WIDE, type Setting } from '../../../dashboard/plots/drawing.js';
import { upright, type Label } from '../../../dashboard/plots/label.js';
import { linesPlot } from '../../../dashboard/plots/lines.js';
import { regionsPlot } from '../../../dashboard/plots/regions.js';
import { scatterPlot } from '../../../dashboard/plots/scatter.js';
import { decode } from './decode-png.js';
import { expectGolden } from './golden.js';

const symbol = (letter: string, below: string): Label => [
  { text: letter, italic: true, level: 0 },
  { text: below, italic: false, level: -1 },
];
const x: Axis = { label: symbol('M', 'h'), unit: upright('GeV'), low: 110, high: 140, scale: 'linear' };
const y: Axis = { label: symbol('M', 't'), unit: upright('GeV'), low: 165, high: 180, scale: 'linear' };
const file: Setting = {
  size: WIDE,
  summary: 'A drawing of a test.',
  notes: ['Made by plots.test.ts.'],
  place: 'file',
};
const page: Setting = { ...file, size: NARROW, notes: [], place: 'page' };

/** Points of a lattice, coloured by which side of a straight line they lie on. */
const lattice = Array.from({ length: 400 }, (_, i) => ({
  h: 110.5 + 1.5 * (i % 20),
  t: 165.25 + 0.75 * Math.floor(i / 20),
}));
const side = ({ h, t }: { h: number; t: number }): number => h - 129.6 - 2 * (t - 173.34);
const xs = Float64Array.from(lattice, (point) => point.h);
const ys = Float64Array.from(lattice, (point) => point.t);

function grid(columns: number, rows: number, value: (h: number, t: number) => number): Float64Array {
  return Float64Array.from({ length: columns * rows }, (_, i) =>
    value(110 + (30 * ((i % columns) + 0.5)) / columns, 165 + (15 * (Math.floor(i / columns) + 0.5)) / rows),
  );
}

describe('plots, as they were last approved', () => {
  it('scatter by class', () => {
    const values = Float64Array.from(lattice, (point) => (side(point) > 0 ? 0 : 1));
    const colour = {
      kind: 'classes',
      values,
      labels: ['stable', 'metastable', 'unstable'],
      colours: [0, 1, 2],
    } as const;
    expectGolden('scatter-classes', scatterPlot(file, { x, y, xs, ys, colour }));
  });

  it('scatter along a diverging ramp', () => {
    const values = Float64Array.from(lattice, side);
    const colour = {
      kind: 'ramp',
      values,
      label: upright('margin'),
      unit: [],
      scale: 'linear',
      diverging: true,
    } as const;
    expectGolden('scatter-ramp', scatterPlot(file, { x, y, xs, ys, colour }));
  });

  it('density of points', () => {
    const values = grid(30, 20, (h, t) =>
      Math.max(0, Math.round(500 - (h - 125) ** 2 - 20 * (t - 172) ** 2)),
    );
    const spec = {
      columns: 30,
      rows: 20,
      values,
      kind: 'counts',
      label: COUNTS_LABEL,
      unit: [],
      scale: 'linear',
    } as const;
    expectGolden('density', densityPlot(file, { x, y, ...spec, diverging: false }));
  });

  it('regions of classes', () => {
    const counts = [0, 1, 2].map((k) =>
      grid(30, 20, (h, t) => (Math.min(2, Math.max(0, Math.ceil(-side({ h, t }) / 15))) === k ? 3 : 0)),
    );
    const all = Float64Array.from(counts.flatMap((one) => [...one]));
    const spec = {
      columns: 30,
      rows: 20,
      labels: ['stable', 'metastable', 'unstable'],
      colours: [0, 1, 2],
      counts: all,
    };
    expectGolden('regions', regionsPlot(file, { x, y, ...spec }));
    expectGolden('regions-narrow', regionsPlot(page, { x, y, ...spec }));
  });

  it('couplings against scale', () => {
    const scales = Array.from({ length: 30 }, (_, i) => Number(`1e${2 + i / 2}`) || 10 ** (2 + i / 2));
    const lines = {
      x: {
        label: upright('μ'),
        unit: upright('GeV'),
        low: scales[0],
        high: scales[29],
        scale: 'log',
      } as Axis,
      y: { label: upright('coupling'), unit: [], low: -0.1, high: 1.2, scale: 'linear' } as Axis,
      xs: scales,
      series: [
        { label: symbol('g', '3'), values: scales.map((_, i) => 1.16 / (1 + 0.05 * i)), colour: 0 },
        { label: symbol('y', 't'), values: scales.map((_, i) => 0.94 / (1 + 0.05 * i)), colour: 2 },
        { label: upright('λ'), values: scales.map((_, i) => (i < 20 ? 0.126 - 0.008 * i : NaN)), colour: 3 },
      ],
    };
    expectGolden('couplings', linesPlot(file, lines));
  });
});

describe('plots', () => {
  const image = (svg: string, index = 0) =>
    decode(Buffer.from([...svg.matchAll(/base64,([^"]+)"/g)][index][1], 'base64'));

  it('put low values low: a single filled cell lands in its corner', () => {
    const values = new Float64Array(6);
    values[0] = 1;
    const spec = {
      columns: 3,
      rows: 2,
      values,
      kind: 'counts',
      label: COUNTS_LABEL,
      unit: [],
      scale: 'linear',
    } as const;
    const { width, height, rgba } = image(densityPlot(file, { x, y, ...spec, diverging: false }));
    const alpha = (column: number, row: number) => rgba[(row * width + column) * 4 + 3];
    expect([alpha(0, height - 1), alpha(width - 1, height - 1), alpha(0, 0)]).toEqual([255, 0, 0]);
  });

  it('leave out points that have no place, and draw the others', () => {
    const some = { xs: Float64Array.of(120, NaN, 130, 500), ys: Float64Array.of(170, 170, NaN, 170) };
    const svg = scatterPlot(file, { x, y, ...some, colour: { kind: 'none' } });
    expect(svg.match(/h0/g)).toHaveLength(1);
    expect(svg).not.toContain('NaN');
  });

  it('survive a ramp without any finite value', () => {
    const values = Float64Array.of(NaN);
    const colour = {
      kind: 'ramp',
      values,
      label: upright('c'),
      unit: [],
      scale: 'log',
      diverging: false,
    } as const;
    const svg = scatterPlot(file, { x, y, xs: Float64Array.of(120), ys: Float64Array.of(170), colour });
    expect(svg).not.toMatch(/NaN|Infinity/);
  });

  it('carry no style, script or event attribute, and escape their words', () => {
    const evil = { ...file, summary: '<script>"x"', notes: ['<b>'] };
    const svg = scatterPlot(evil, { x, y, xs, ys, colour: { kind: 'none' } });
    expect(svg).not.toMatch(/<script|<b>|\sstyle=|\son\w+=/);
  });
});
