type Counts = Record<'secure' | 'probable' | 'ambiguous', number>;

/** Figures of a release, computed once when it is frozen. */
export interface ReleaseSummary {
  confidence: Counts;
  decidedBy: Record<'people' | 'engine', number>;
  redshiftRange: [number, number] | null;
  /** Median of c sigma_z / (1 + z), km/s; null where no row has an error. */
  medianVelocityErrorKms: number | null;
}
