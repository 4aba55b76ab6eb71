/** What a redshift is tried as: narrow lines, a quasar's broad lines, or an asymmetric Lyman-alpha line. */
export type SuspectKind = 'narrow' | 'broad' | 'lyman';

/** A redshift worth a joint fit. */
export interface Suspect {
  logScale: number;
  sigmaKms: number;
  kind: SuspectKind;
  /** Log evidence against "no lines", before any joint fit. */
  score: number;
}

/** Narrow lines this wide (sigma, km/s) sit at the limit of the fit and describe something broad. */
export const WIDEST_NARROW_KMS = 435;
