import { z } from 'zod';

const columnsSchema = z
  .object({
    /** HDU name or number where the table or image stands. */
    extension: z.union([z.string(), z.number().int().min(0)]).optional(),
    wavelength: z.string().optional(),
    /** How the wavelength column is to be read. */
    wavelengthScale: z.enum(['linear', 'log10', 'ln']).optional(),
    wavelengthUnit: z.string().optional(),
    flux: z.string().optional(),
    fluxUnit: z.string().optional(),
    error: z.string().optional(),
    variance: z.string().optional(),
    inverseVariance: z.string().optional(),
    mask: z.string().optional(),
    sky: z.string().optional(),
    /** Sigma of the line-spread function, in pixels or ångström. */
    lsfSigmaPixels: z.string().optional(),
    lsfSigmaAngstrom: z.string().optional(),
  })
  .strict();

/** What an instrument's headers don't say; the same description serves `measure --instrument` and the app. */
export const instrumentSchema = z
  .object({
    name: z.string().min(1),
    medium: z.enum(['vacuum', 'air']).optional(),
    /** Velocity frame of the wavelengths when a file is silent. */
    specsys: z.enum(['TOPOCENT', 'BARYCENT', 'HELIOCEN', 'GEOCENTR']).optional(),
    site: z
      .object({
        latitudeDegrees: z.number().min(-90).max(90),
        longitudeEastDegrees: z.number().min(-180).max(360),
        heightMetres: z.number().min(-500).max(9000),
      })
      .strict()
      .optional(),
    /** Resolving power lambda / FWHM, or FWHM in ångström; at most one of the two. */
    resolvingPower: z.number().positive().optional(),
    resolutionFwhmAngstrom: z.number().positive().optional(),
    /** Wavelength ranges of the detector known to be bad, vacuum ångström in the observatory's frame. */
    badRegionsAngstrom: z.array(z.tuple([z.number().positive(), z.number().positive()])).optional(),
    /** How far the position in a header may be from the target list's before it is doubted, arcsec; 3 unless told. */
    positionToleranceArcsec: z.number().positive().max(3600).optional(),
    columns: columnsSchema.optional(),
  })
  .strict()
  .refine((i) => i.resolvingPower === undefined || i.resolutionFwhmAngstrom === undefined, {
    message: 'give resolvingPower or resolutionFwhmAngstrom, not both',
  });
export type Instrument = z.infer<typeof instrumentSchema>;
