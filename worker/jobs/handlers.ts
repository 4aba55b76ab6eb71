import { ingestFiles } from '$lib/server/ingest/ingest-files';
import { measureSpectra } from '$lib/server/measure/measure-spectra';
import type { JobName, JobPayload } from '$lib/server/queue/jobs';
import { measureOnThread, takeOnThread } from '../thread-pool';

type Handlers = { [N in JobName]: (payload: JobPayload<N>, jobId: string) => Promise<void> };

/** One handler a job name; each is idempotent. */
export const handlers: Handlers = {
  ingest: ({ fileIds }, jobId) => ingestFiles(fileIds, jobId, takeOnThread),
  measure: ({ spectrumIds }, jobId) => measureSpectra(spectrumIds, jobId, measureOnThread),
};
