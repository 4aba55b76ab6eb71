import type { ColumnAssignment } from '$lib/domain/instrument';
import type { Medium } from '$lib/domain/spectrum';
import type { Place } from '../place';
import { parseSpectralUnit } from '../units/spectral-unit';
import { unknownUnit, wavelengthsFromValues, type Wavelengths } from './wavelengths';

/**
 * Wavelengths of an axis that a person described: `first` at the first pixel, `step` from one to the next, in the unit
 * and scale of the assignment.
 *
 * @throws InputProblem `unit-unknown`, `unit-missing`
 */
export function assignedWavelengths(
  { axis, wavelengthUnit, wavelengthScale }: ColumnAssignment,
  pixels: number,
  medium: Medium | null,
  place: Place,
): Wavelengths {
  const { first, step } = axis!;
  const unit = wavelengthUnit ? parseSpectralUnit(wavelengthUnit) : null;
  if (wavelengthUnit && !unit) throw unknownUnit(wavelengthUnit, place, 'the assigned axis');
  const values = Float64Array.from({ length: pixels }, (_, i) => first + step * i);
  return wavelengthsFromValues(values, unit, wavelengthScale ?? null, medium, place);
}
