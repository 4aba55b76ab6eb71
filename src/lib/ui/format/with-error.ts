import { trueMinus } from './true-minus';

/**
 * Decimals at which a value with this error is written: one digit of error, two where it starts with 1
 * (0.00003 gives 5, 0.000014 gives 6). Common practice, no source.
 * 0 for an error of 1 or more, and where the error is zero or not finite.
 */
export function decimalsOfError(error: number): number {
  if (!(error > 0) || !Number.isFinite(error)) return 0;
  // Round to one digit first: 0.0096 is written 0.010, so its first digit is 1.
  const [digit, exponent] = error.toExponential(0).split('e').map(Number);
  const decimals = -exponent + (digit === 1 ? 1 : 0);
  return Math.min(20, Math.max(0, decimals));
}

/** `0.31042 ± 0.00003`: the value stops where its error does. Without a usable error the value alone, to `fallbackDecimals`. */
export function withError(value: number, error: number | null, fallbackDecimals = 5): string {
  if (!Number.isFinite(value)) return 'not known';
  if (error === null || !(error > 0) || !Number.isFinite(error)) return trueMinus(value.toFixed(fallbackDecimals));
  const decimals = decimalsOfError(error);
  return `${trueMinus(value.toFixed(decimals))} ± ${error.toFixed(decimals)}`;
}
