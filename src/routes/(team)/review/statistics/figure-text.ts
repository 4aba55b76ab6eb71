import { trueMinus } from '$lib/ui/format/true-minus';

/** `0.62`; two decimals, since a programme has hundreds of looks at most; `not known` without one. */
export const coefficientText = (value: number | null): string =>
  value === null ? 'not known' : trueMinus(value.toFixed(2));

/** `93 %`, whole percents; `not known` without a share. */
export const shareText = (share: number | null): string =>
  share === null ? 'not known' : `${Math.round(share * 100)} %`;

/** `8.4 s`, `2 min 05 s` from two minutes on; `not known` without one. */
export function lookTimeText(seconds: number | null): string {
  if (seconds === null) return 'not known';
  if (seconds < 120) return `${seconds.toFixed(1)} s`;
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)} min ${String(whole % 60).padStart(2, '0')} s`;
}

/** `37 of 40`. */
export const ofText = (part: number, whole: number): string => `${part} of ${whole}`;

/** `(80 to 97 %)`; empty without a share. */
export const rangeText = (share: { low: number; high: number } | null): string =>
  share === null ? '' : `(${Math.round(share.low * 100)} to ${Math.round(share.high * 100)} %)`;

/** `12 % (−3 to 27 %)`, a difference of shares with its interval. */
export function differenceText({ difference, low, high }: { difference: number; low: number; high: number }): string {
  const percent = (value: number) => trueMinus(String(Math.round(value * 100) || 0));
  return `${percent(difference)} % (${percent(low)} to ${percent(high)} %)`;
}
