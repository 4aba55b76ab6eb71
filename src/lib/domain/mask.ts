import { z } from 'zod';

/** Why a scientist leaves a stretch of a spectrum out. */
export const MASK_REASONS = [
  'sky residual',
  'air absorption',
  'cosmic ray',
  'bad pixels',
  'second object',
  'other',
] as const;
export type MaskReason = (typeof MASK_REASONS)[number];

/** More would be a spectrum not worth a fit. */
export const MOST_MASKS = 64;

/** A stretch of wavelength that a fit leaves out: vacuum ångström, barycentric. */
export const maskSchema = z
  .object({
    from: z.number().positive().max(1e7),
    to: z.number().positive().max(1e7),
    reason: z.enum(MASK_REASONS),
  })
  .refine(({ from, to }) => to > from, 'A mask ends at a longer wavelength than it begins.');
export type Mask = z.infer<typeof maskSchema>;

export const masksSchema = z.array(maskSchema).max(MOST_MASKS);

/** The same as a form sends it: JSON text. */
export const masksTextSchema = z
  .string()
  .max(20_000)
  .transform((text, context): unknown => {
    try {
      return JSON.parse(text);
    } catch {
      context.addIssue({ code: 'custom', message: 'The masks are not JSON.' });
      return z.NEVER;
    }
  })
  .pipe(masksSchema);
