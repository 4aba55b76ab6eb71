import { z } from 'zod';

/** Which column, or image of a FITS file, is what, and in which units. */
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
    /** A wavelength axis where the file has none: value at the first pixel and step, in `wavelengthUnit` and scale. */
    axis: z
      .object({
        first: z.number(),
        step: z.number().refine((step) => step !== 0, 'the step is not 0'),
      })
      .strict()
      .optional(),
  })
  .strict();
export type ColumnAssignment = z.infer<typeof columnsSchema>;

const mediumSchema = z.enum(['vacuum', 'air']);

/** What a person said of the columns of one kind of file: it holds for every file whose columns are so named. */
export const assignmentSchema = z
  .object({
    /** The names of all columns of the table, or of all images of the file, in their order. */
    names: z.array(z.string().max(200)).min(1).max(1000),
    columns: columnsSchema,
    /** Medium of these files' wavelengths. */
    medium: mediumSchema.optional(),
  })
  .strict();

/** Two positive numbers and, for people to read, why; the range may not run backwards. */
const badRegionSchema = z
  .tuple([z.number().positive(), z.number().positive(), z.string().trim().max(200).optional()])
  .refine(([from, to]) => to > from, 'the range ends before it begins: write its shorter wavelength first');

/** What an instrument's headers don't say; the same description serves `measure --instrument` and the app. */
export const instrumentSchema = z
  .object({
    name: z.string().trim().min(1, 'give it a name').max(200),
    medium: mediumSchema.optional(),
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
    /** Resolving power lambda / FWHM, or FWHM in ångström, or pairs of wavelength and FWHM; at most one of them. */
    resolvingPower: z.number().positive().optional(),
    resolutionFwhmAngstrom: z.number().positive().optional(),
    /** Pairs of vacuum wavelength in the observatory's frame and FWHM there, ångström; straight lines between them. */
    resolutionTableAngstrom: z
      .array(z.tuple([z.number().positive(), z.number().positive()]))
      .min(2, 'give two wavelengths or more')
      .max(200)
      .refine((pairs) => pairs.every(([at], i) => i === 0 || at > pairs[i - 1][0]), 'the wavelengths must rise')
      .optional(),
    /** Wavelength ranges of the detector known to be bad, vacuum ångström in the observatory's frame, with a reason. */
    badRegionsAngstrom: z.array(badRegionSchema).max(500).optional(),
    /** How far the position in a header may be from the target list's before it is doubted, arcsec; 3 unless told. */
    positionToleranceArcsec: z.number().positive().max(3600).optional(),
    columns: columnsSchema.optional(),
    /** What was said of files whose columns could not be told; the last that fits a file goes before `columns`. */
    assignments: z.array(assignmentSchema).max(200).optional(),
  })
  .strict()
  .refine(
    (i) =>
      [i.resolvingPower, i.resolutionFwhmAngstrom, i.resolutionTableAngstrom].filter((given) => given !== undefined)
        .length <= 1,
    { message: 'give resolvingPower, resolutionFwhmAngstrom or resolutionTableAngstrom, one of them' },
  );
export type Instrument = z.infer<typeof instrumentSchema>;
