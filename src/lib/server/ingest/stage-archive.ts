import { createHash } from 'node:crypto';
import { Refusal } from '$lib/domain/refusal';
import { config } from '../config/config';
import { insertUpload, removeUpload, type ArchiveKind } from '../database/queries/uploads';
import { staging } from '../storage/staging';
import { queueArchive } from './queue-archive';
import { cleanName, type NightAdmitted } from './receive-file';

/** Takes an archive that came in one piece, to be unpacked. Called for a night that `admitToNight` let in. */
export async function stageArchive(
  night: NightAdmitted,
  userId: string,
  archive: { name: string; kind: ArchiveKind; stream: AsyncIterable<Uint8Array> },
): Promise<{ id: string; name: string }> {
  const name = cleanName(archive.name);
  const { id } = await insertUpload({ nightId: night.id, userId, name, sizeBytes: 0, sha256: null });
  const hash = createHash('sha256');
  const limit = config().MAX_ARCHIVE_BYTES;
  let sizeBytes = 0;
  async function* counted(): AsyncGenerator<Uint8Array> {
    for await (const chunk of archive.stream) {
      sizeBytes += chunk.length;
      if (sizeBytes > limit) {
        const what = `The archive is larger than the ${Math.floor(limit / 1024 / 1024)} MiB allowed.`;
        throw new Refusal('too-large', what, 'Split it, or ask an administrator to raise MAX_ARCHIVE_BYTES.', name);
      }
      hash.update(chunk);
      yield chunk;
    }
  }
  try {
    await staging().write(id, 0, counted(), limit, async () => {});
    await queueArchive(night, { id, kind: archive.kind, sha256: hash.digest('hex'), sizeBytes });
    return { id, name };
  } catch (error) {
    await staging().remove(id);
    await removeUpload(id);
    throw error;
  }
}
