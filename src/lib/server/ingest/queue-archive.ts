import { inTransaction } from '../database/in-transaction';
import { removeExpected } from '../database/queries/expected-files';
import { touchNights } from '../database/queries/nights';
import { settleAsArchive, type ArchiveKind } from '../database/queries/uploads';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';

export const FOREIGN_ARCHIVE = {
  code: 'archive-foreign',
  what: 'This kind of archive is not unpacked.',
  mend: 'Pack its files as zip, tar or tar.gz, or hand them in as they are.',
};

/** Wishes for a staged archive to be unpacked, in the transaction that says that all of it is here. */
export async function queueArchive(
  night: { id: string },
  archive: { id: string; kind: ArchiveKind; sha256: string; sizeBytes: number },
): Promise<void> {
  const { id, sha256 } = archive;
  await inTransaction(async (transaction) => {
    await settleAsArchive(id, archive, transaction);
    await removeExpected(night.id, { sha256: [sha256] }, transaction);
    await wishFor('unpack', [{ jobId: `unpack-${id}`, payload: { uploadId: id } }], transaction);
    await touchNights([night.id], transaction);
  });
  nudge('outbox');
  nudge('nights', night.id);
}
