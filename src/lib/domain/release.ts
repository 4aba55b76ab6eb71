import { z } from 'zod';
import { confidenceSchema } from './confidence';

/** What a draft takes in: spectra decided by people, and, where asked, those the engine alone calls good. */
export const draftSelectionSchema = z.object({
  /** Confidence words that enter. */
  confidence: z.array(confidenceSchema.exclude(['none'])).min(1),
  /** True takes the engine's word for spectra that nobody has judged, if it is among `confidence`. */
  engineAlone: z.boolean(),
  /** Names of targets that stay out, whatever was decided on them: the mend for what blocks a draft and can't be settled. */
  leaveOut: z.array(z.string().min(1).max(200)).max(10_000).optional(),
  /** Pairs of names that share a place on the sky and are two objects all the same. */
  truePairs: z
    .array(z.tuple([z.string().min(1).max(200), z.string().min(1).max(200)]))
    .max(10_000)
    .optional(),
});
export type DraftSelection = z.infer<typeof draftSelectionSchema>;

/** Unit of every published line flux; VOUnits 1.0 spells it `10**-17 erg.s**-1.cm**-2`. */
export const LINE_FLUX_UNIT = '1e-17 erg s-1 cm-2';

/** One published row. Positions ICRS degrees; fluxes in `fluxUnit`, null where the spectrum's own flux is relative. */
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
  /** `LINE_FLUX_UNIT`, or null where the spectrum's flux is relative and the row has no line flux. */
  fluxUnit: string | null;
  spectrum: string;
}
