import { QueryTypes } from 'sequelize';
import { database } from '../connection';

/** Some programmes by name. */
export async function namedProgrammes(ids: readonly string[]): Promise<{ id: string; slug: string; name: string }[]> {
  if (ids.length === 0) return [];
  return database().query('SELECT id, slug, name FROM programmes WHERE id IN (:ids) ORDER BY name, id', {
    replacements: { ids },
    type: QueryTypes.SELECT,
  });
}
