/**
 * The value below which `share` (0 to 1) of `values` lie, between two of them by the straight line (Hyndman and Fan's
 * type 7). NaN without any.
 */
export function quantile(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b);
  const at = Math.min(1, Math.max(0, share)) * (sorted.length - 1);
  const below = sorted[Math.floor(at)] ?? Number.NaN;
  const above = sorted[Math.ceil(at)] ?? Number.NaN;
  return below + (above - below) * (at - Math.floor(at));
}

export function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Rise of y for one of x by least squares, with its standard error. NaN for fewer than three points. */
export function slopeOf(points: readonly { x: number; y: number }[]): {
  slope: number;
  standardError: number;
} {
  const meanX = mean(points.map(({ x }) => x));
  const meanY = mean(points.map(({ y }) => y));
  const spreadX = points.reduce((sum, { x }) => sum + (x - meanX) ** 2, 0);
  const slope = points.reduce((sum, { x, y }) => sum + (x - meanX) * (y - meanY), 0) / spreadX;
  const rest = points.reduce((sum, { x, y }) => sum + (y - meanY - slope * (x - meanX)) ** 2, 0);
  const standardError = Math.sqrt(rest / (points.length - 2) / spreadX);
  return points.length < 3 ? { slope: Number.NaN, standardError: Number.NaN } : { slope, standardError };
}

/** As it is told: two decimals. */
export function rounded(value: number): number {
  return Math.round(value * 100) / 100;
}
