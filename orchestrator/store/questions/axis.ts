import { UserMistake } from '../../mistakes.js';
import type { AxisRequest, DensityGrid } from '../reading.js';

export type BinnedAxis = DensityGrid['x'];

/** The axis for a range; one that is empty or a single value gets some width, so that it can be drawn.
 *  @throws UserMistake for a chosen range that no axis can have */
export function axisOf(request: AxisRequest, range: readonly [number, number], bins: number): BinnedAxis {
  if (request.range !== null) checkRange(request);
  const [low, high] = withWidth(range[0], range[1], request.scale);
  return { low, high, scale: request.scale, bins };
}

/** The bin of every value, -1 outside the range. A bin contains its lower edge; the last one both. */
export function findBins(axis: BinnedAxis, values: Float64Array, count: number, out: Int32Array): void {
  const { low, high, bins } = axis;
  const isLog = axis.scale === 'log';
  const start = isLog ? Math.log10(low) : low;
  const width = (isLog ? Math.log10(high) : high) - start;
  for (let i = 0; i < count; i++) {
    const value = values[i];
    const place = isLog ? Math.log10(value) : value;
    // Rounding of the logarithm must not push an edge outside.
    const bin = Math.max(0, Math.min(bins - 1, Math.floor(((place - start) / width) * bins)));
    out[i] = value >= low && value <= high ? bin : -1;
  }
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
