import { UserMistake } from '../../mistakes.js';
import type { AxisRequest, DensityGrid } from '../reading.js';

export type BinnedAxis = DensityGrid['x'];

/** The axis for a range; one that is empty or a single value gets some width, so that it can be drawn.
 *  @throws UserMistake for a chosen range that no axis can have */
export function axisOf(request: AxisRequest, range: readonly number[], bins: number): BinnedAxis {
  if (request.range !== null) checkRange(request);
  const [low, high] = withWidth(range[0], range[1], request.scale);
  return { low, high, scale: request.scale, bins };
}

/** Bin of a value, or -1 outside the range. A bin contains its lower edge; the last one both. */
export function binOf(axis: BinnedAxis): (value: number) => number {
  const { low, high, bins } = axis;
  const place = axis.scale === 'log' ? Math.log10 : (value: number) => value;
  const start = place(low);
  const width = place(high) - start;
  return (value) => {
    if (!(value >= low && value <= high)) return -1;
    return Math.min(bins - 1, Math.floor(((place(value) - start) / width) * bins));
  };
}

function withWidth(low: number, high: number, scale: AxisRequest['scale']): [number, number] {
  if (low > high) return scale === 'log' ? [1, 10] : [0, 1];
  if (low < high) return [low, high];
  if (scale === 'log') return [low / 2, low * 2];
  const half = Math.abs(low) / 2 || 0.5;
  return [low - half, low + half];
}

function checkRange({ column, range, scale }: AxisRequest): void {
  const [low, high] = range!;
  const where = `range of ${column}`;
  const found = `${low} to ${high}`;
  if (!(low < high) || !Number.isFinite(high - low)) {
    throw new UserMistake({ where, expected: 'a lower and then a higher finite number', found });
  }
  if (scale === 'log' && low <= 0) {
    throw new UserMistake({ where, expected: 'positive numbers on a logarithmic axis', found });
  }
}
