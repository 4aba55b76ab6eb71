import { database } from '../connection';
import { SpectrumFile } from '../models/observing';

/** Of these digests, those whose bytes the programme has. */
export async function knownDigests(programmeId: string, sha256: readonly string[]): Promise<Set<string>> {
  database();
  if (sha256.length === 0) return new Set();
  const where = { programmeId, sha256: [...sha256] };
  const rows = await SpectrumFile.findAll({ where, attributes: ['sha256'], raw: true });
  return new Set(rows.map((row) => row.sha256));
}
