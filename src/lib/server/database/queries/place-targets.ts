import { QueryTypes, type Transaction } from 'sequelize';
import { zoneOf } from '$lib/domain/sky';
import { foldName } from '$lib/domain/target-name';
import { isListedAs, type KnownTarget, type NamedPlace, type TargetRegister } from '$lib/domain/target-register';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { Target, TargetName } from '../models/observing';
import { registerFor, targetRadius } from './target-register';

export interface WantedTarget extends NamedPlace {
  /** How far its place may be from the listed one. */
  toleranceArcsec: number;
  /** It stands on a list, which names places. */
  isList?: boolean;
}

export interface PlacedTargets {
  /** One a place, in order. */
  targets: KnownTarget[];
  /** Those that these places or names may be. */
  register: TargetRegister;
  /** Ids of those that were made. */
  made: Set<string>;
}

/**
 * The target of each named place of a programme, in order, made where there is none. Targets are made by one
 * transaction at a time, which holds the programme's register until it ends; places that are all known wait for nobody.
 */
export async function placeTargets(
  programmeId: string,
  wanted: readonly WantedTarget[],
  transaction: Transaction,
): Promise<PlacedTargets> {
  const radius = await targetRadius(programmeId, transaction);
  const known = await registerFor(programmeId, wanted, radius, transaction);
  const found = wanted.map((place) => known.match(place, place.toleranceArcsec, place.isList));
  const complete = found.every((target, i) => target && (target.decDegrees !== null || wanted[i].decDegrees === null));
  if (complete) {
    await addNames(programmeId, found as KnownTarget[], wanted, known, transaction);
    return { targets: found as KnownTarget[], register: known, made: new Set() };
  }
  await holdRegister(programmeId, transaction);
  const register = await registerFor(programmeId, wanted, radius, transaction);
  const made: KnownTarget[] = [];
  const targets = wanted.map((place) => {
    const target = register.match(place, place.toleranceArcsec, place.isList);
    if (target) return target;
    const fresh = { id: newIdentifier(), ...placeOf(place), isListed: false, folded: [foldName(place.name)] };
    register.add(fresh);
    made.push(fresh);
    return fresh;
  });
  await Target.bulkCreate(made.map((target) => ({ ...rowOf(target), programmeId })) as never[], { transaction });
  await TargetName.bulkCreate(
    made.map(({ id, name, folded }) => ({ targetId: id, folded: folded[0], programmeId, name: name.slice(0, 200) })),
    { transaction },
  );
  await placeUnplaced(targets, wanted, register, transaction);
  await addNames(programmeId, targets, wanted, register, transaction);
  return { targets, register, made: new Set(made.map(({ id }) => id)) };
}

const placeOf = ({ name, raDegrees, decDegrees }: NamedPlace) => {
  const hasPlace = raDegrees !== null && decDegrees !== null;
  return { name, raDegrees: hasPlace ? raDegrees : null, decDegrees: hasPlace ? decDegrees : null };
};

const rowOf = ({ id, name, raDegrees, decDegrees }: KnownTarget) => ({
  id,
  name: name.slice(0, 200),
  raDegrees,
  decDegrees,
  zone: decDegrees === null ? null : zoneOf(decDegrees),
});

async function holdRegister(programmeId: string, transaction: Transaction): Promise<void> {
  const replacements = { programmeId };
  await database().query('INSERT IGNORE INTO target_registers (programme_id) VALUES (:programmeId)', {
    replacements,
    transaction,
  });
  await database().query('SELECT programme_id FROM target_registers WHERE programme_id = :programmeId FOR UPDATE', {
    replacements,
    type: QueryTypes.SELECT,
    transaction,
  });
}

/** Writes the places of targets that were known by name alone until now. */
async function placeUnplaced(
  targets: KnownTarget[],
  wanted: readonly WantedTarget[],
  register: TargetRegister,
  transaction: Transaction,
): Promise<void> {
  for (const [i, target] of targets.entries()) {
    const { raDegrees, decDegrees } = wanted[i];
    if (target.decDegrees !== null || raDegrees === null || decDegrees === null) continue;
    register.place(target, raDegrees, decDegrees);
    const { id } = target;
    await Target.update({ raDegrees, decDegrees, zone: zoneOf(decDegrees) }, { where: { id }, transaction });
  }
}

/** Keeps further names of places; not those that a list has at another place, for there the header is in doubt. */
async function addNames(
  programmeId: string,
  targets: KnownTarget[],
  wanted: readonly WantedTarget[],
  register: TargetRegister,
  transaction: Transaction,
): Promise<void> {
  const rows: { targetId: string; folded: string; programmeId: string; name: string }[] = [];
  for (const [i, target] of targets.entries()) {
    const { name } = wanted[i];
    const folded = foldName(name);
    if (target.folded.includes(folded)) continue;
    if (register.named(name).some((other) => isListedAs(other, name) && other.id !== target.id)) continue;
    register.addName(target, folded);
    rows.push({ targetId: target.id, folded, programmeId, name: name.slice(0, 200) });
  }
  if (rows.length) await TargetName.bulkCreate(rows, { ignoreDuplicates: true, transaction });
}
