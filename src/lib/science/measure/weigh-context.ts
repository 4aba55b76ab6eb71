import type { Feature } from './features';
import type { FitData } from './fit/fit-windows';

/** What weighing a fit needs besides the fit. */
export interface WeighContext {
  data: FitData;
  /** Flexible continuum, one value a pixel. */
  continuum: Float64Array;
  /** Stiff continuum, which passes under broad lines. */
  stiffContinuum: Float64Array;
  features: readonly Feature[];
  /** Measured noise over declared noise; the same for every hypothesis, so that their evidences compare. */
  noiseFactor: number;
  /** ln of the flux that a typical line's noise amounts to. */
  logNoiseFlux: number;
}
