import { z } from 'zod';

/** Every job: its name and the schema of its payload, ids only. The worker has one handler for each. */
export const JOBS = {
  ingest: z.object({ fileIds: z.array(z.uuid()).min(1) }),
  mail: z.object({ letterId: z.uuid() }),
  /** An archive whose bytes are all here. */
  unpack: z.object({ uploadId: z.uuid() }),
  measure: z.object({ spectrumIds: z.array(z.uuid()).min(1) }),
  remeasure: z.object({ remeasureId: z.uuid(), spectrumIds: z.array(z.uuid()).min(1) }),
} as const;

export type JobName = keyof typeof JOBS;
export type JobPayload<N extends JobName> = z.infer<(typeof JOBS)[N]>;

export const JOB_NAMES = Object.keys(JOBS) as JobName[];
