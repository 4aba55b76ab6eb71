import { ASSIGNED_ROLES, type AssignedRole, type ShapePart } from '$lib/domain/file-shape';
import type { Trial } from '$lib/domain/column-assignment';

/** What stands in the form: texts as they are typed, the empty one for what is not said. */
export interface AssignmentDraft {
  /** Name of the column of each role. */
  roles: Record<AssignedRole, string>;
  wavelengthUnit: string;
  wavelengthScale: '' | 'linear' | 'log10' | 'ln';
  fluxUnit: string;
  medium: '' | 'vacuum' | 'air';
  /** Wavelengths by a column, or by an axis that is typed. */
  axis: 'column' | 'typed';
  axisFirst: string;
  axisStep: string;
}

const isRole = (role: string | null): role is AssignedRole =>
  (ASSIGNED_ROLES as readonly (string | null)[]).includes(role);

/** What the columns' own names tell already; the rest is empty. A part without a second column needs an axis. */
export function draftOf(part: ShapePart): AssignmentDraft {
  const roles = Object.fromEntries(ASSIGNED_ROLES.map((role) => [role, ''])) as Record<AssignedRole, string>;
  for (const { name, guess } of part.columns) if (isRole(guess) && roles[guess] === '') roles[guess] = name;
  const numbers = part.columns.filter(({ holds }) => holds !== 'text');
  const lone = numbers.length === 1;
  if (lone) roles.flux = numbers[0].name;
  return {
    roles,
    wavelengthUnit: '',
    wavelengthScale: '',
    fluxUnit: '',
    medium: '',
    axis: lone ? 'typed' : 'column',
    axisFirst: '',
    axisStep: '',
  };
}

const numberIn = (text: string): number => (text.trim() === '' ? Number.NaN : Number(text.trim().replace(',', '.')));

/**
 * The assignment that a form says, or what is missing yet, in words.
 *
 * @param part the table or the images that it is for
 */
export function assignmentOf(draft: AssignmentDraft, part: ShapePart): { assignment: Trial } | { missing: string } {
  const { roles, axis } = draft;
  if (roles.flux === '') return { missing: 'Say which column is the flux.' };
  if (axis === 'column' && roles.wavelength === '')
    return { missing: 'Say which column is the wavelength, or type an axis.' };
  if (axis === 'column' && roles.wavelength === roles.flux) return { missing: 'Wavelength and flux are one column.' };
  const [first, step] = [numberIn(draft.axisFirst), numberIn(draft.axisStep)];
  if (axis === 'typed' && !(Number.isFinite(first) && Number.isFinite(step) && step !== 0)) {
    return { missing: 'Type the wavelength of the first pixel and the step from one to the next.' };
  }
  const errors = (['error', 'variance', 'inverseVariance'] as const).filter((role) => roles[role] !== '');
  if (errors.length > 1) return { missing: 'Error, variance and inverse variance say the same: choose one of them.' };
  const given = ASSIGNED_ROLES.filter((role) => roles[role] !== '' && !(role === 'wavelength' && axis === 'typed'));
  return {
    assignment: {
      names: part.columns.map(({ name }) => name),
      columns: {
        ...Object.fromEntries(given.map((role) => [role, roles[role]])),
        ...(axis === 'typed' && { axis: { first, step } }),
        ...(draft.wavelengthUnit.trim() && { wavelengthUnit: draft.wavelengthUnit.trim() }),
        ...(draft.wavelengthScale && { wavelengthScale: draft.wavelengthScale }),
        ...(draft.fluxUnit.trim() && { fluxUnit: draft.fluxUnit.trim() }),
      },
      ...(draft.medium && { medium: draft.medium }),
    },
  };
}
