import { trueMinus } from './true-minus';

/** Whole numbers with a comma at thousands: `1,163`. */
export function countText(count: number): string {
  return Number.isFinite(count) ? trueMinus(Math.round(count).toLocaleString('en-US')) : 'not known';
}
