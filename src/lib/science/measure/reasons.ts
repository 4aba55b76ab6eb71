import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { EXPECTED_LINES } from '../constants/lines';
import type { FilterBank } from './detect';
import type { FitErrors } from './fit/fit-errors';
import type { JointFit } from './fit/joint-fit';
import type { LineSupport } from './final-fit';
import type { FitData } from './fit/fit-windows';

const round = (value: number, digits: number) => value.toFixed(digits);
const list = (names: string[]) =>
  names.length < 2 ? (names[0] ?? '') : `${names.slice(0, -1).join(', ')} and ${names[names.length - 1]}`;

/** Strong lines whose absence says something. */
const TELLING = [
  'H-alpha 6565',
  '[O III] 5008',
  'H-beta 4863',
  '[O II] 3730',
  'Lyman-alpha 1216',
  'C IV 1548',
  'Mg II 2796',
];

/** Sentences that speak for a fitted redshift. */
export function reasonsFor(data: FitData, fit: JointFit, support: readonly LineSupport[], bank: FilterBank): string[] {
  const reasons: string[] = [];
  const best = [...support].sort((a, b) => b.significance - a.significance);
  if (best.length >= 2) {
    const names = best.slice(0, 3).map((line) => line.name);
    const spread = peakSpreadKms(best.slice(0, 3), bank);
    reasons.push(
      spread === null
        ? `${list(names)} are all seen.`
        : `${list(names)} agree within ${round(Math.max(1, spread), 0)} km/s.`,
    );
  } else if (best.length === 1) {
    reasons.push(`${best[0].name} stands out with a signal-to-noise of ${round(best[0].significance, 1)}.`);
  }
  const stretch = Math.exp(fit.logScale);
  const beyond = EXPECTED_LINES.filter((line) => TELLING.includes(line.name)).filter((line) => {
    const at = line.wavelengthVacuum * stretch;
    const outside = at < data.wavelength[0] || at > data.wavelength[data.count - 1];
    const near = at > data.wavelength[0] * 0.8 && at < data.wavelength[data.count - 1] * 1.25;
    return outside && near;
  });
  for (const line of beyond.slice(0, 2)) {
    const end = line.wavelengthVacuum * stretch < data.wavelength[0] ? 'blue' : 'red';
    reasons.push(`${line.name} would lie beyond the ${end} end.`);
  }
  return reasons;
}

/** Sentences that speak against a fitted redshift: strong lines that should be seen and are not. */
export function reasonsAgainst(fit: JointFit, errors: FitErrors, support: readonly LineSupport[]): string[] {
  const reasons: string[] = [];
  const n = fit.components.length;
  fit.components.forEach((component, i) => {
    if (!TELLING.includes(component.name) || !(fit.gram[i * n + i] > 0)) return;
    if (fit.amplitude[i] < 2 * errors.amplitude[i]) reasons.push(`${component.name} is in range and not seen.`);
  });
  if (support.length === 1) reasons.push('It rests on one feature, whose identity the spectrum alone must settle.');
  if (support.length === 0) reasons.push('No single line reaches a signal-to-noise of 4.');
  return reasons.slice(0, 4);
}

/** Spread of the lines' own peaks in the filter about their common redshift, km/s; null where a peak can't be told. */
function peakSpreadKms(lines: readonly LineSupport[], bank: FilterBank): number | null {
  const offsets: number[] = [];
  for (const line of lines) {
    const offset = ownPeakOffset(line.wavelengthObserved, bank);
    if (offset === null) return null;
    offsets.push(offset * SPEED_OF_LIGHT_KMS);
  }
  return offsets.length < 2 ? null : Math.max(...offsets) - Math.min(...offsets);
}

function ownPeakOffset(wavelength: number, bank: FilterBank): number | null {
  const filter = bank.filters[Math.min(1, bank.filters.length - 1)];
  const node = Math.round((Math.log(wavelength) - bank.start) / bank.step);
  let k = node;
  while (k + 1 < bank.count && k - node < 3 && filter.significance[k + 1] > filter.significance[k]) k++;
  while (k > 1 && node - k < 3 && filter.significance[k - 1] > filter.significance[k]) k--;
  if (k < 1 || k > bank.count - 2 || Math.abs(k - node) >= 3) return null;
  const [a, b, c] = [filter.significance[k - 1], filter.significance[k], filter.significance[k + 1]];
  const curve = a - 2 * b + c;
  const shift = curve < 0 ? (0.5 * (a - c)) / curve : 0;
  return bank.start + (k + Math.max(-0.5, Math.min(0.5, shift))) * bank.step - Math.log(wavelength);
}
