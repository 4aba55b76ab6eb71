import type { InstrumentListRow, InstrumentPage } from '$lib/domain/instrument-view';
import { Refusal } from '$lib/domain/refusal';
import { may, permit, programmesWhere, type Actor } from '../auth/permissions';
import {
  findInstrument,
  newestInstruments,
  nightsOfInstrument,
  spectraNotBy,
  versionsOf,
} from '../database/queries/instruments';
import { programmeOfNight } from '../database/queries/night-snapshot';

/** One version of an instrument, with all its versions and the nights that use it. */
export async function readInstrument(actor: Actor | null, id: string): Promise<InstrumentPage> {
  const found = await findInstrument(id);
  if (!found) {
    throw new Refusal('not-found', 'There is no such instrument, or it belongs to a programme you are not in.');
  }
  const { programmeId, name, version, description, note } = found;
  permit(actor, 'instrument.read', programmeId);
  const [programme, versions, nights, spectraByOlder] = await Promise.all([
    programmeOfNight(programmeId),
    versionsOf(programmeId, name),
    nightsOfInstrument(programmeId, name),
    spectraNotBy(programmeId, name, id),
  ]);
  const own = versions.find((row) => row.id === id)!;
  const isNewest = versions[0].id === id;
  return {
    id,
    name,
    programme: { id: programme.id, slug: programme.slug, name: programme.name },
    version,
    isNewest,
    description,
    note,
    by: own.by,
    savedAt: own.savedAt,
    versions,
    nights,
    spectraByOlder: isNewest ? spectraByOlder : 0,
    maySave: may(actor, 'instrument.save', programmeId),
    mayRemeasure: may(actor, 'measurement.repeat', programmeId),
  };
}

/** The instruments of the actor's programmes, and the programmes in which they may save one. */
export async function listInstruments(
  actor: Actor | null,
): Promise<{ instruments: InstrumentListRow[]; maySaveIn: string[] }> {
  const instruments = await newestInstruments(programmesWhere(actor, 'instrument.read'));
  return { instruments, maySaveIn: programmesWhere(actor, 'instrument.save') };
}
