import { programmesWhere, type Actor } from '../auth/permissions';
import { listNightRows } from '../database/queries/nights';

export interface NightInList {
  id: string;
  civilDate: string;
  notes: string;
  programme: { name: string; slug: string; isDemo: boolean };
  files: number;
  spectra: number;
  measured: number;
  filesWithProblems: number;
}

/** Nights of the programmes the actor may read, newest first. */
export async function listNights(actor: Actor | null): Promise<NightInList[]> {
  const rows = await listNightRows(programmesWhere(actor, 'night.read'));
  return rows.map((row) => ({
    id: row.id,
    civilDate: row.civilDate,
    notes: row.notes,
    programme: { name: row.programmeName, slug: row.programmeSlug, isDemo: !!row.isDemo },
    files: Number(row.files),
    spectra: Number(row.spectra),
    measured: Number(row.measured),
    filesWithProblems: Number(row.problems),
  }));
}
