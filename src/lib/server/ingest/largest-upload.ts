import { Refusal } from '$lib/domain/refusal';
import { config } from '../config/config';

const ARCHIVE_NAME = /\.(zip|tar|tgz|tar\.gz)$/i;
const mib = (bytes: number) => `${Math.floor(bytes / 1024 / 1024)} MiB`;

/** Largest upload of any kind, bytes. */
export const largestUpload = (): number => Math.max(config().MAX_FILE_BYTES, config().MAX_ARCHIVE_BYTES);

/** Refuses, before a byte is sent, what would be refused at the end. Only the end tells what is an archive. */
export function refuseSize(name: string, sizeBytes: number): Refusal | null {
  if (sizeBytes === 0) return new Refusal('invalid', `${name} is empty.`, 'Check that it was written whole.', name);
  const { MAX_FILE_BYTES, MAX_ARCHIVE_BYTES } = config();
  const [limit, kind, variable] = ARCHIVE_NAME.test(name)
    ? [MAX_ARCHIVE_BYTES, 'archive', 'MAX_ARCHIVE_BYTES']
    : [MAX_FILE_BYTES, 'file', 'MAX_FILE_BYTES'];
  if (sizeBytes <= limit) return null;
  return new Refusal(
    'too-large',
    `The ${kind} is larger than the ${mib(limit)} allowed.`,
    `Split it, or ask an administrator to raise ${variable}.`,
    name,
  );
}
