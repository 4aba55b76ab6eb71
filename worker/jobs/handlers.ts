import { ingestFile } from '$lib/server/ingest/ingest-file';
import { measureSpectra } from '$lib/server/measure/measure-spectra';
import type { JobName, JobPayload } from '$lib/server/queue/jobs';
import { measureOnThread, readOnThread } from '../thread-pool';

type Handlers = { [N in JobName]: (payload: JobPayload<N>, jobId: string) => Promise<void> };

/** One handler a job name; each is idempotent. */
export const handlers: Handlers = {
  ingest: ({ fileId }, jobId) => ingestFile(fileId, jobId, readOnThread),
  measure: ({ spectrumIds }, jobId) => measureSpectra(spectrumIds, jobId, measureOnThread),
};
