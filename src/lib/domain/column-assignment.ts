import { z } from 'zod';
import type { ShapePart } from './file-shape';
import { assignmentSchema } from './instrument';

/** What a person says of one part of a file; `names` are those of the part, so that it fits files like it. */
export type Trial = z.input<typeof assignmentSchema>;

/** What is sent to keep an assignment. */
export const assignmentSaveSchema = z
  .object({
    /** Name of the instrument that remembers it. */
    instrument: z.string().trim().min(1, 'name the instrument that is to remember it').max(200),
    assignment: assignmentSchema,
  })
  .strict();
export type AssignmentSave = z.input<typeof assignmentSaveSchema>;

/** The first spectrum that a trial brings, thinned for a plot; or what is wrong with it, in words. */
export interface TrialAnswer {
  spectra: number;
  /** Ångström as the file's own axis tells them, in its own medium. */
  wavelengthAngstrom: number[];
  /** NaN is sent as null. */
  flux: (number | null)[];
  error: (number | null)[] | null;
  sky: (number | null)[] | null;
  /** Pixels of the spectrum, and those that its mask or errors call unusable. */
  pixels: number;
  unusable: number;
  fluxUnit: string | null;
  medium: 'vacuum' | 'air' | null;
  warnings: string[];
  problem: { what: string; mend: string } | null;
}

/** A file whose columns are to be assigned. */
export interface AssignmentPage {
  file: { id: string; name: string; state: 'waiting' | 'read' | 'failed' | 'needs assignment' };
  night: { id: string; civilDate: string };
  programme: { id: string; name: string };
  problems: { what: string; mend: string }[];
  parts: ShapePart[];
  /** The instrument of the night; null where it has none. */
  instrument: { id: string; name: string; version: number } | null;
  /** Files of the same shape that wait, this one included. */
  waiting: { id: string; name: string }[];
  maySave: boolean;
}
