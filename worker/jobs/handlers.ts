import { composeReport } from '$lib/server/ingest/compose-report';
import { ingestFiles } from '$lib/server/ingest/ingest-files';
import { unpackArchive } from '$lib/server/ingest/unpack-archive';
import { sendLetter } from '$lib/server/mail/send-letter';
import { measureSpectra } from '$lib/server/measure/measure-spectra';
import { remeasureSpectra } from '$lib/server/measure/remeasure-spectra';
import { composeInvitation } from '$lib/server/programmes/compose-invitation';
import { composeDigest } from '$lib/server/review/compose-digest';
import type { JobName, JobPayload } from '$lib/server/queue/jobs';
import { measureOnThread, remeasureOnThread, takeOnThread } from '../thread-pool';

type Handlers = { [N in JobName]: (payload: JobPayload<N>, jobId: string) => Promise<void> };

/** Who writes the letters of each kind. */
const letters = { invitation: composeInvitation, 'night report': composeReport, 'mention digest': composeDigest };

/** One handler a job name; each is idempotent. */
export const handlers: Handlers = {
  ingest: ({ fileIds }, jobId) => ingestFiles(fileIds, jobId, takeOnThread),
  mail: ({ letterId }, jobId) => sendLetter(letterId, jobId, letters),
  unpack: ({ uploadId }, jobId) => unpackArchive(uploadId, jobId),
  measure: ({ spectrumIds }, jobId) => measureSpectra(spectrumIds, jobId, measureOnThread),
  remeasure: (payload, jobId) => remeasureSpectra(payload, jobId, remeasureOnThread),
};
