import { trueMinus } from './true-minus';

/** Signal-to-noise to one decimal; `0` below 0.05, so that nothing reads as 0.0 or −0.0. */
export function signalToNoiseText(signalToNoise: number): string {
  if (!Number.isFinite(signalToNoise)) return 'not known';
  return Math.abs(signalToNoise) < 0.05 ? '0' : trueMinus(signalToNoise.toFixed(1));
}
