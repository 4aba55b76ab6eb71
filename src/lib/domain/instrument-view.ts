import { z } from 'zod';
import { instrumentSchema, type Instrument } from './instrument';

/** What is sent to save a description of an instrument: a new version, or its first. */
export const instrumentSaveSchema = z
  .object({
    /** Slug or id of the programme. */
    programme: z.string().min(1).max(60),
    description: instrumentSchema,
    /** What changed, for those who read the list of versions. */
    note: z.string().trim().max(500).default(''),
    /** Number of the version that was changed; 0 for a new instrument. Another one saved meanwhile is a conflict. */
    from: z.number().int().min(0).optional(),
  })
  .strict();
export type InstrumentSave = z.input<typeof instrumentSaveSchema>;

/** A version in the list of an instrument's versions. Times ISO 8601 UTC. */
export interface InstrumentVersionRow {
  id: string;
  version: number;
  note: string;
  /** null for versions from before names were kept. */
  by: string | null;
  savedAt: string;
  /** Files and current measurements read by this version. */
  files: number;
  measurements: number;
}

/** An instrument in the list of all: its newest version. */
export interface InstrumentListRow {
  id: string;
  name: string;
  programme: { id: string; slug: string; name: string };
  version: number;
  by: string | null;
  savedAt: string;
  nights: number;
  spectra: number;
}

/** One version of an instrument with all its versions, newest first. */
export interface InstrumentPage {
  id: string;
  name: string;
  programme: { id: string; slug: string; name: string };
  version: number;
  isNewest: boolean;
  description: Instrument;
  note: string;
  by: string | null;
  savedAt: string;
  versions: InstrumentVersionRow[];
  nights: { id: string; civilDate: string }[];
  /** Spectra whose current measurement was made by an older version. */
  spectraByOlder: number;
  maySave: boolean;
  mayRemeasure: boolean;
}
