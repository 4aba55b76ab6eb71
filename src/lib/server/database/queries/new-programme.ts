import type { Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import { database } from '../connection';
import { InstrumentVersion } from '../models/observing';
import { Programme, ProgrammeMember } from '../models/people';

export async function insertProgramme(
  programme: { slug: string; name: string; isDemo: boolean },
  transaction: Transaction,
): Promise<string> {
  const { id } = await Programme.create(programme as never, { transaction });
  return id;
}

export async function insertInstrument(
  instrument: { programmeId: string; name: string; version: number; description: Instrument },
  transaction: Transaction,
): Promise<string> {
  database();
  const { id } = await InstrumentVersion.create(instrument as never, { transaction });
  return id;
}

export async function insertMembership(
  programmeId: string,
  userId: string,
  roles: string[],
  transaction: Transaction,
): Promise<void> {
  const rows = roles.map((role) => ({ programmeId, userId, role }));
  await ProgrammeMember.bulkCreate(rows, { transaction });
}
