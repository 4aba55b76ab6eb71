import { z } from 'zod';

/** What may be wrong with a spectrum or its measurement; set by the engine or by a scientist. */
export const FLAGS = [
  'sky residual',
  'cosmic ray',
  'blend',
  'wavelength doubt',
  'low signal',
  'edge of range',
  'noise underestimated',
  'two redshifts',
  'wide emission',
  'not extragalactic',
  'bad pixels',
  'other',
] as const;
export const flagSchema = z.enum(FLAGS);
export type Flag = z.infer<typeof flagSchema>;
