import { QueryTypes, type Transaction } from 'sequelize';
import { coneBounds } from '$lib/domain/sky';
import { foldName } from '$lib/domain/target-name';
import { TargetRegister, type KnownTarget, type NamedPlace } from '$lib/domain/target-register';
import { database } from '../connection';

type Row = Omit<KnownTarget, 'isListed' | 'folded'> & { isListed: number; folded: string | null };

const COLUMNS = `t.id, t.name, t.ra_degrees AS raDegrees, t.dec_degrees AS decDegrees, t.is_listed AS isListed, n.folded`;

/** Zones and right ascensions to look through for targets near these places. */
function bounds(wanted: readonly NamedPlace[], radiusArcsec: number) {
  const ranges: { zone: number; low: number; high: number }[] = [];
  for (const { raDegrees, decDegrees } of wanted) {
    if (raDegrees === null || decDegrees === null) continue;
    const { zones, raRanges } = coneBounds(raDegrees, decDegrees, radiusArcsec / 3600);
    for (let zone = zones[0]; zone <= zones[1]; zone++)
      for (const [low, high] of raRanges) ranges.push({ zone, low, high });
  }
  return ranges;
}

/** How far apart two places of a programme are at most to be one target, arcsec. */
export async function targetRadius(programmeId: string, transaction?: Transaction): Promise<number> {
  const [row] = await database().query<{ radius: number }>(
    'SELECT target_radius_arcsec AS radius FROM programmes WHERE id = :programmeId',
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
  return row?.radius ?? 1;
}

/** Known targets that these places or names may be, oldest first. */
export async function registerFor(
  programmeId: string,
  wanted: readonly NamedPlace[],
  radiusArcsec: number,
  transaction?: Transaction,
): Promise<TargetRegister> {
  const folded = [...new Set(wanted.map(({ name }) => foldName(name)))];
  const ranges = bounds(wanted, radiusArcsec);
  const rows = await database().query<Row>(
    `SELECT ${COLUMNS} FROM (
        SELECT n.target_id AS id FROM JSON_TABLE(:folded, '$[*]' COLUMNS (folded VARCHAR(200)
            CHARACTER SET utf8mb4 COLLATE utf8mb4_bin PATH '$')) w
          JOIN target_names n ON n.programme_id = :programmeId AND n.folded = w.folded
        UNION
        SELECT t.id FROM JSON_TABLE(:ranges, '$[*]' COLUMNS (zone INT PATH '$.zone', low DOUBLE PATH '$.low',
            high DOUBLE PATH '$.high')) r
          JOIN targets t ON t.programme_id = :programmeId AND t.zone = r.zone AND t.ra_degrees BETWEEN r.low AND r.high
      ) found JOIN targets t ON t.id = found.id LEFT JOIN target_names n ON n.target_id = t.id ORDER BY t.id`,
    {
      replacements: { programmeId, folded: JSON.stringify(folded), ranges: JSON.stringify(ranges) },
      type: QueryTypes.SELECT,
      transaction,
    },
  );
  const register = new TargetRegister(radiusArcsec);
  for (const target of targetsOfRows(rows)) register.add(target);
  return register;
}

/** Every listed target of a programme that has a place. */
export async function listedTargets(programmeId: string, transaction?: Transaction): Promise<TargetRegister> {
  const rows = await database().query<Row>(
    `SELECT ${COLUMNS} FROM targets t LEFT JOIN target_names n ON n.target_id = t.id
      WHERE t.programme_id = :programmeId AND t.is_listed AND t.zone IS NOT NULL ORDER BY t.id`,
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
  const register = new TargetRegister(0);
  for (const target of targetsOfRows(rows)) register.add(target);
  return register;
}

function targetsOfRows(rows: Row[]): KnownTarget[] {
  const targets = new Map<string, KnownTarget>();
  for (const { folded, isListed, ...rest } of rows) {
    const target = targets.get(rest.id) ?? { ...rest, isListed: !!isListed, folded: [] };
    if (folded !== null) target.folded.push(folded);
    targets.set(rest.id, target);
  }
  return [...targets.values()];
}
