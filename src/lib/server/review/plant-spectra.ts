import { createHash } from 'node:crypto';
import { readSpectra } from '$lib/formats/read-spectra';
import { ENGINE_VERSION } from '$lib/science/measure/settings';
import { Random } from '$lib/science/simulate/random';
import { inTransaction } from '../database/in-transaction';
import {
  donorsOf,
  namesTaken,
  nightsToPlant,
  readDonor,
  followDonors,
  storePlanted,
  type NightToPlant,
} from '../database/queries/planted';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { objects } from '../storage/storage';
import { nameLike } from './name-like';
import { plantedDealt } from './planted-dealt';
import { writePlanted } from './write-planted';

/** In one go of a worker: making one takes some 50 ms, and the next minute brings the rest. */
const AT_ONCE = 10;
const DONORS_TRIED = 8;
const MOST_BYTES = 256 * 1024 * 1024;

/**
 * Worker use-case, run every minute. Makes the planted spectra that the programmes' rates ask for in nights at rest: files
 * in no night, whose spectra have no target, so that they stand in the review queue and nowhere else. What is made for a
 * place of a night follows from both, and a place is filled once, however many workers look. Returns how many were made.
 */
export async function plantSpectra(): Promise<number> {
  let made = 0;
  for (const night of await nightsToPlant()) {
    const wanted = plantedDealt(night.plantedRate, night.measured);
    for (let place = night.planted + 1; place <= wanted && made < AT_ONCE; place++) {
      if (!(await plantOne(night, place))) break;
      made++;
    }
  }
  const outdated = await inTransaction(async (transaction) => {
    const ids = await followDonors(ENGINE_VERSION, transaction);
    await wishFor('measure', ids.map(wishOf), transaction);
    return ids.length;
  });
  if (made + outdated > 0) nudge('outbox');
  return made;
}

const wishOf = (id: string) => ({ jobId: `measure-${id}-1`, payload: { spectrumIds: [id] } });

function seedOf(nightId: string, place: number): number {
  return createHash('sha256').update(`${nightId} ${place}`).digest().readUInt32BE(0);
}

async function plantOne({ nightId, programmeId }: NightToPlant, place: number): Promise<boolean> {
  const seed = seedOf(nightId, place);
  const random = new Random(seed);
  const [donors, taken] = await Promise.all([donorsOf(nightId, ENGINE_VERSION), namesTaken(programmeId)]);
  for (let i = 0; i < Math.min(DONORS_TRIED, donors.length); i++) {
    const { id: donorId, name: like } = random.choice(donors);
    const name = nameLike(
      like,
      taken,
      Array.from({ length: 40 }, () => random.integer(-9, 9)),
    );
    if (!name) continue;
    const donor = await readDonor(donorId);
    const instrument = donor.instrument ?? undefined;
    const isAsked = (extension: number, row: number) => extension === donor.extension && row === donor.rowIndex;
    const { spectra } = readSpectra(await objects().read(donor.sha256), donor.originalName, instrument, isAsked);
    const raw = spectra.find(({ extension, row }) => isAsked(extension, row));
    const written = raw && writePlanted(raw, donor.measurement, instrument, name, seed);
    if (!written) continue;
    const { bytes, planted, raw: read, spectrum } = written;
    const { sha256, sizeBytes } = await objects().put(once(bytes), MOST_BYTES);
    const { wavelength } = spectrum;
    const stored = await inTransaction(async (transaction) => {
      const id = await storePlanted(
        {
          ...{ programmeId, nightId, place, donorId, seed, name, sha256, sizeBytes },
          ...{ redshift: planted.redshift, detail: { what: planted.what, signalToNoise: planted.signalToNoise } },
          ...{ fileName: donor.originalName, instrumentId: donor.instrumentId },
          ...{ extension: read.extension, row: read.row, pixelCount: wavelength.length },
          ...{ wavelengthMin: wavelength[0], wavelengthMax: wavelength[wavelength.length - 1] },
        },
        transaction,
      );
      if (id) await wishFor('measure', [wishOf(id)], transaction);
      return id;
    });
    return stored !== null;
  }
  log.warn({ nightId }, 'no spectrum of the night could be planted upon');
  return false;
}

async function* once(bytes: Uint8Array): AsyncIterable<Uint8Array> {
  yield bytes;
}
