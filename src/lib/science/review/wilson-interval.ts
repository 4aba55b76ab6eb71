/** z of a two-sided 95 % interval. */
const Z_95 = 1.959963984540054;

/** A share of a count with its interval; null where nothing was counted. */
export interface Share {
  share: number;
  low: number;
  high: number;
}

/**
 * Wilson's score interval of a share: with p = k / n, (p + z²/2n ± z √(p(1−p)/n + z²/4n²)) / (1 + z²/n). It stays within 0 and
 * 1, and has width at 0 of n.
 *
 * @param right how many of them, 0 to `count`
 * @param count how many there are
 * @param z of the interval; 95 % when left out
 * @returns null where `count` is 0
 *
 * Source: Wilson (1927, Journal of the American Statistical Association 22, 209).
 *
 * @example
 * wilsonInterval(81, 263); // { share: 0.308, low: 0.255, high: 0.366 }
 */
export function wilsonInterval(right: number, count: number, z = Z_95): Share | null {
  if (count === 0) return null;
  const share = right / count;
  const middle = share + (z * z) / (2 * count);
  const half = z * Math.sqrt((share * (1 - share)) / count + (z * z) / (4 * count * count));
  const scale = 1 + (z * z) / count;
  return { share, low: Math.max(0, (middle - half) / scale), high: Math.min(1, (middle + half) / scale) };
}

/** A difference of two shares with its interval. */
export interface ShareDifference {
  difference: number;
  low: number;
  high: number;
}

/**
 * Difference of two independent shares, first less second, with the interval made of both Wilson intervals:
 * d − √((p1−l1)² + (u2−p2)²) to d + √((u1−p1)² + (p2−l2)²).
 *
 * @returns null where either was counted from nothing
 *
 * Source: Newcombe (1998, Statistics in Medicine 17, 873), method 10.
 */
export function shareDifference(first: Share | null, second: Share | null): ShareDifference | null {
  if (!first || !second) return null;
  const difference = first.share - second.share;
  return {
    difference,
    low: difference - Math.hypot(first.share - first.low, second.high - second.share),
    high: difference + Math.hypot(first.high - first.share, second.share - second.low),
  };
}
