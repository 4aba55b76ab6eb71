import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { velocityBetweenKms } from './verdicts-agree';

/** The engine's answer on one spectrum of a target. */
export interface TargetAnswer {
  id: string;
  targetId: string;
  redshift: number;
  /** Standard error; null where it is not known. */
  redshiftError: number | null;
}

/** A redshift that speaks against a spectrum's own. */
export interface Conflict {
  /** The other spectrum's redshift, of several the one furthest away. */
  redshift: number;
  kms: number;
}

/** Two spectra of one target whose redshifts differ by no more than this may both be right. */
const LEAST_KMS = 1000;
const SIGMAS = 3;

/**
 * Spectra that disagree with another of the same target: |dv| > 1,000 km/s and > 3 combined standard errors.
 *
 * @param answers spectra with a redshift; those without say nothing, since a faint exposure may simply not show it
 * @returns by spectrum; both sides of a conflict are in it. Empty where no target has two
 */
export function findConflicts(answers: readonly TargetAnswer[]): Map<string, Conflict> {
  const byTarget = new Map<string, TargetAnswer[]>();
  for (const answer of answers) {
    const group = byTarget.get(answer.targetId);
    if (group) group.push(answer);
    else byTarget.set(answer.targetId, [answer]);
  }
  const conflicts = new Map<string, Conflict>();
  for (const group of byTarget.values()) {
    for (const one of group) {
      for (const other of group) {
        if (other === one) continue;
        const kms = velocityBetweenKms(one.redshift, other.redshift);
        const error = Math.hypot(one.redshiftError ?? 0, other.redshiftError ?? 0);
        const errorKms = (SPEED_OF_LIGHT_KMS * error) / (1 + 0.5 * (one.redshift + other.redshift));
        if (kms <= LEAST_KMS || kms <= SIGMAS * errorKms) continue;
        if (kms > (conflicts.get(one.id)?.kms ?? 0)) conflicts.set(one.id, { redshift: other.redshift, kms });
      }
    }
  }
  return conflicts;
}
