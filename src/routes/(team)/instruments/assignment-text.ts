import type { Instrument } from '$lib/domain/instrument';

const WORDS: Record<string, string> = { inverseVariance: 'inverse variance' };
const ROLES = ['wavelength', 'flux', 'error', 'variance', 'inverseVariance', 'mask', 'sky'] as const;

/** An assignment in one line: `aa, bb, cc: wavelength aa (um), flux bb, in air`. */
export function assignmentText({ names, columns, medium }: NonNullable<Instrument['assignments']>[number]): string {
  const said = ROLES.flatMap((role) => {
    const column = columns[role];
    if (column === undefined) return [];
    const unit = role === 'wavelength' ? columns.wavelengthUnit : role === 'flux' ? columns.fluxUnit : undefined;
    return [`${WORDS[role] ?? role} ${column}${unit ? ` (${unit})` : ''}`];
  });
  if (columns.axis) {
    said.unshift(
      `wavelength from ${columns.axis.first} by ${columns.axis.step} ${columns.wavelengthUnit ?? ''}`.trim(),
    );
  }
  if (medium) said.push(`in ${medium}`);
  return `${names.join(', ')}: ${said.join(', ')}`;
}
