import { z } from 'zod';

/** Files from this size on go up in chunks that can be gone on with; smaller ones share a request. */
export const CHUNKED_FROM_BYTES = 8 * 1024 * 1024;
/** Bytes of one chunk: what a broken connection loses at most, and a second or so of an observatory's line. */
export const CHUNK_BYTES = 4 * 1024 * 1024;
/** Files told in one announcement; 2,000 of the longest paths stay under the cap of an ordinary body. */
export const FILES_PER_ANNOUNCEMENT = 2_000;

export const sha256Schema = z.string().regex(/^[0-9a-f]{64}$/, 'give the SHA-256 as 64 lower-case hexadecimal digits');

/** Files that are about to be sent to a night; the digest is told as soon as it is known. */
export const announcementSchema = z
  .object({
    files: z
      .array(
        z
          .object({
            /** Folders and name as the person sees them. */
            path: z.string().min(1).max(500),
            sizeBytes: z.number().int().min(0),
            sha256: sha256Schema.optional(),
          })
          .strict(),
      )
      .min(1)
      .max(FILES_PER_ANNOUNCEMENT),
  })
  .strict();
export type Announcement = z.output<typeof announcementSchema>;

/** What is said of each announced file, in the order told. */
export const announcedSchema = z.object({
  files: z.array(
    z.discriminatedUnion('state', [
      /** The night has these bytes now: nothing to send. */
      z.object({ path: z.string(), state: z.literal('here') }),
      z.object({ path: z.string(), state: z.literal('expected') }),
      /** Sending it would be in vain. */
      z.object({ path: z.string(), state: z.literal('refused'), what: z.string(), mend: z.string() }),
    ]),
  ),
});
export type Announced = z.infer<typeof announcedSchema>;

/** Files that will not be sent after all; without paths, all of the night that are still expected. */
export const withdrawalSchema = z
  .object({ paths: z.array(z.string().min(1).max(500)).min(1).max(FILES_PER_ANNOUNCEMENT).optional() })
  .strict();

/** What an archive gave: members taken, members whose bytes the night had, members refused. */
export const unpackedSchema = z.object({
  taken: z.number().int(),
  already: z.number().int(),
  refused: z.number().int(),
});
export type Unpacked = z.infer<typeof unpackedSchema>;

/**
 * Where an upload in chunks stands. open: bytes are missing; unpacking: all of an archive is here and its members are
 * being taken; done; failed: an archive that could not be unpacked.
 */
export const uploadStateSchema = z.object({
  id: z.string(),
  name: z.string(),
  sizeBytes: z.number(),
  receivedBytes: z.number(),
  state: z.enum(['open', 'unpacking', 'done', 'failed']),
  /** The file it became, and whether the night had its bytes before; null for archives and until all bytes are here. */
  file: z.object({ id: z.string(), sha256: z.string(), already: z.boolean() }).nullable(),
  /** null for what is no archive. */
  unpacked: unpackedSchema.nullable(),
});
export type UploadState = z.infer<typeof uploadStateSchema>;
