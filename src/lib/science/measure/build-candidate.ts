import type { Candidate } from '$lib/domain/measurement';
import { FWHM_PER_SIGMA } from '../constants/physical';
import type { FittedCandidate } from './candidate-fit';
import { supportingLines, type FinalFit, type LineSupport } from './final-fit';
import type { AbsorptionCandidate, Hypotheses } from './hypotheses';
import { lineFitsOf } from './line-fits';
import type { PreparedSpectrum } from './prepare';
import { reasonsAgainst, reasonsFor } from './reasons';
import { redshiftWithErrors } from './redshift-error';

/** Error given to an absorption redshift, km/s: a fifth of the widest kernel that sees its lines. */
const ABSORPTION_ERROR_KMS = 60;

/** An emission redshift as it is listed. */
export function emissionCandidate(
  prepared: PreparedSpectrum,
  hypotheses: Hypotheses,
  candidate: FittedCandidate,
  refit: FinalFit,
  probability: number,
  first: boolean,
): Candidate {
  const data = prepared.working;
  const support: LineSupport[] = supportingLines(refit, hypotheses.banks.lines, prepared);
  const stated = redshiftWithErrors(refit, candidate.kind === 'broad');
  const scale = { flux: prepared.working.scale, errors: refit.errorScale };
  const lyman = candidate.kind === 'lyman';
  return {
    redshift: stated.redshift,
    redshiftError: stated.total,
    probability,
    objectClass: candidate.family.objectClass,
    fwhmKms: refit.lyman?.fwhmKms ?? FWHM_PER_SIGMA * refit.fit.sigmaKms[candidate.kind === 'broad' ? 1 : 0],
    reasonsFor: reasonsFor(data, refit.fit, support, hypotheses.banks.lines),
    reasonsAgainst: reasonsAgainst(refit.fit, refit.errors, support),
    lines: lineFitsOf(data, refit.fit, refit.errors, scale, first ? 2 : 3, lyman, refit.logScale),
  };
}

/** An absorption redshift as it is listed. */
export function absorptionCandidate(candidate: AbsorptionCandidate, probability: number): Candidate {
  const stretch = Math.exp(candidate.logScale);
  return {
    redshift: stretch - 1,
    redshiftError: (ABSORPTION_ERROR_KMS / 299792.458) * stretch,
    probability,
    objectClass: 'absorption only',
    fwhmKms: null,
    reasonsFor: [`Absorption of ${candidate.family}: ${candidate.strongFeatures} features deeper than 4 sigma.`],
    reasonsAgainst: ['No emission line speaks for it.'],
    lines: [],
  };
}
