import type { CouplingTrace } from './commands.js';
import { padded, type Axis } from './plots/axis.js';
import type { Setting } from './plots/drawing.js';
import { upright } from './plots/label.js';
import { linesPlot, type Series } from './plots/lines.js';
import { parseSymbol, symbolText, unitLabel } from './symbols.js';

export interface CouplingPanel {
  readonly summary: string;
  draw(setting: Setting): string;
}

/** Running couplings against scale: one panel for each unit, and the small couplings of a unit in a panel of their
 *  own, since a quartic of a few hundredths is a flat line beside a gauge coupling. */
export function couplingPanels(trace: CouplingTrace): readonly CouplingPanel[] {
  const reach = trace.values.map(largest);
  const units = [...new Set(trace.couplings.map((coupling) => coupling.unit))];
  return units.flatMap((unit) => {
    const own = trace.couplings
      .map((_, index) => index)
      .filter((index) => trace.couplings[index].unit === unit);
    const most = Math.max(...own.map((index) => reach[index]));
    const small = own.filter((index) => reach[index] < most * SMALL);
    const large = own.filter((index) => reach[index] >= most * SMALL);
    return [large, small].filter((group) => group.length > 0).map((group) => panel(trace, group, unit));
  });
}

const SMALL = 0.2;
/** Colours that thin lines can wear on paper; the palest of the palette comes last. */
const LINE_COLOURS = [0, 2, 5, 3, 4, 6, 1];

function panel(trace: CouplingTrace, group: readonly number[], unit: string): CouplingPanel {
  const series: Series[] = group.map((index, place) => ({
    label: parseSymbol(trace.couplings[index].symbol),
    values: trace.values[index].map((value) => value ?? NaN),
    colour: LINE_COLOURS[place % LINE_COLOURS.length],
  }));
  const all = series.flatMap((one) => one.values).filter((value) => Number.isFinite(value));
  const [low, high] = rangeOf(all, unit);
  const x: Axis = {
    label: parseSymbol('\\mu'),
    unit: unitLabel('GeV'),
    low: trace.scales[0],
    high: trace.scales[trace.scales.length - 1],
    scale: 'log',
  };
  const label = upright(unit === '1' ? 'coupling' : 'mass parameter');
  const y: Axis = { label, unit: unitLabel(unit), low, high, scale: 'linear' };
  const names = group.map((index) => symbolText(trace.couplings[index].symbol)).join(', ');
  return {
    summary: `Running of ${names} against the scale, from ${power(x.low)} to ${power(x.high)} GeV. The values are in the table of couplings.`,
    draw: (setting) => linesPlot(setting, { x, y, xs: trace.scales, series }),
  };
}

/** Couplings are seen against zero; a mass parameter, which may be far from it, against itself. */
function rangeOf(values: readonly number[], unit: string): readonly [number, number] {
  const origin = unit === '1' ? [0] : [];
  return padded(Math.min(...values, ...origin), Math.max(...values, ...origin), 'linear');
}

function largest(values: readonly (number | null)[]): number {
  return Math.max(
    0,
    ...values.map((value) => Math.abs(value ?? 0)).filter((value) => Number.isFinite(value)),
  );
}

function power(scale: number): string {
  return scale.toExponential(1).replace('e+', 'e');
}
