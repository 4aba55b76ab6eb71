import { z } from 'zod';
import { confidenceSchema } from './confidence';
import { flagSchema } from './flag';

const number = z.number().nullable();

export const OBJECT_CLASSES = [
  'star-forming',
  'active nucleus',
  'quasar',
  'lyman-alpha emitter',
  'absorption only',
  'star',
] as const;
export const objectClassSchema = z.enum(OBJECT_CLASSES);
export type ObjectClass = z.infer<typeof objectClassSchema>;

/** One line of a candidate. Wavelengths in vacuum ångström, flux in the spectrum's own unit times ångström. */
export const lineFitSchema = z.object({
  line: z.string(),
  wavelengthRest: z.number(),
  wavelengthObserved: z.number(),
  flux: number,
  fluxError: number,
  equivalentWidthRest: number,
  equivalentWidthRestError: number,
  fwhmKms: number,
  fwhmKmsError: number,
  signalToNoise: number,
});
export type LineFit = z.infer<typeof lineFitSchema>;

/** One possible redshift. `reasonsFor` and `reasonsAgainst` are sentences for people. */
export const candidateSchema = z.object({
  redshift: z.number(),
  redshiftError: z.number(),
  probability: z.number(),
  objectClass: objectClassSchema,
  /** Intrinsic narrow-line FWHM, km/s; null where no line was fitted. */
  fwhmKms: number,
  reasonsFor: z.array(z.string()),
  reasonsAgainst: z.array(z.string()),
  lines: z.array(lineFitSchema),
});
export type Candidate = z.infer<typeof candidateSchema>;

/** Derived quantities; units: luminosities erg/s, star-formation rate solar masses a year, E(B-V) magnitudes. */
export const derivedSchema = z.object({
  balmerDecrement: number,
  balmerDecrementError: number,
  colourExcess: number,
  colourExcessError: number,
  luminosityDistanceMpc: number,
  cosmology: z.object({ hubbleConstant: z.number(), omegaMatter: z.number() }),
  luminosities: z.record(z.string(), z.number()),
  starFormationRate: number,
  starFormationRateError: number,
  ionisationClass: z.string().nullable(),
  /** 3 sigma upper limits, flux unit times ångström, for expected lines not seen. */
  upperLimits: z.record(z.string(), z.number()),
});
export type Derived = z.infer<typeof derivedSchema>;

/** What one engine version says of one spectrum. */
export const measurementSchema = z.object({
  redshift: number,
  redshiftError: number,
  redshiftErrorMeasured: number,
  redshiftSystemic: number,
  secondRedshift: number,
  probability: z.number(),
  /** Calibrated probability of the rivals that have no emission-line redshift. */
  rivals: z.object({ nothing: z.number(), star: z.number(), passive: z.number() }),
  confidence: confidenceSchema,
  fluxUnit: z.string().nullable(),
  candidates: z.array(candidateSchema),
  /** Lines of the first candidate when `redshift` is set. */
  lines: z.array(lineFitSchema),
  derived: derivedSchema.nullable(),
  reasons: z.array(z.string()),
  flags: z.array(flagSchema),
  noiseFactor: number,
  frame: z.object({
    medium: z.enum(['vacuum', 'air']).nullable(),
    specsys: z.string().nullable(),
    barycentricKms: number,
  }),
  engine: z.object({ version: z.string(), lineList: z.string(), settings: z.string() }),
});
export type Measurement = z.infer<typeof measurementSchema>;

/** One object of the output of `measure`: a measurement and where it came from, or an error. */
export type MeasureOutput = { source: string; extension: number; row: number; name: string | null } & (
  Measurement | { error: string }
);
