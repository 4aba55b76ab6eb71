import { z } from 'zod';
import { confidenceSchema } from './confidence';

/** What a draft takes in: spectra decided by people, and, where asked, those the engine alone calls good. */
export const draftSelectionSchema = z.object({
  /** Confidence words that enter. */
  confidence: z.array(confidenceSchema.exclude(['none'])).min(1),
  /** True takes the engine's word for spectra that nobody has judged, if it is among `confidence`. */
  engineAlone: z.boolean(),
});
export type DraftSelection = z.infer<typeof draftSelectionSchema>;

/** One published row. Positions ICRS degrees; fluxes in `fluxUnit` times ångström. */
export interface ReleaseRow {
  row: number;
  name: string;
  ra: number;
  dec: number;
  redshift: number;
  redshiftError: number | null;
  confidence: string;
  probability: number | null;
  objectClass: string | null;
  decidedBy: string;
  hAlphaFlux: number | null;
  hAlphaFluxError: number | null;
  hBetaFlux: number | null;
  hBetaFluxError: number | null;
  o3Flux: number | null;
  o3FluxError: number | null;
  o2Flux: number | null;
  o2FluxError: number | null;
  fluxUnit: string | null;
  spectrum: string;
}
