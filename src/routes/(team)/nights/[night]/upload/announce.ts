import { announcedSchema, type Announced } from '$lib/domain/upload';

/** Waits before an announcement that failed is made again, milliseconds. After the last the files are sent unasked. */
const AGAIN_AFTER_MS = [1_000, 3_000];
/** Few enough that the longest paths stay under the cap of an ordinary body. */
export const TOLD_AT_ONCE = 1_000;

export interface ToldFile {
  path: string;
  sizeBytes: number;
  sha256?: string | undefined;
}

/**
 * Tells the server which files are about to come; what it says of each, in order. null where it can't be asked: sending
 * then finds out what is wrong, and does so in words.
 */
export async function announce(nightId: string, files: ToldFile[]): Promise<Announced['files'] | null> {
  for (let attempt = 0; ; attempt++) {
    try {
      const response = await fetch(`/api/v1/nights/${nightId}/expected`, {
        method: 'POST',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify({ files }),
      });
      if (response.ok) {
        const answer = announcedSchema.safeParse(await response.json());
        return answer.success && answer.data.files.length === files.length ? answer.data.files : null;
      }
      if (response.status < 500) return null;
    } catch {
      // The connection broke: tried again below.
    }
    if (attempt >= AGAIN_AFTER_MS.length) return null;
    await new Promise((resolve) => setTimeout(resolve, AGAIN_AFTER_MS[attempt]));
  }
}

/** Tells the server that files will not come after all; without paths, none that are still expected. */
export async function withdraw(nightId: string, paths?: string[]): Promise<void> {
  const all = paths ?? [];
  for (let at = 0; at === 0 || at < all.length; at += TOLD_AT_ONCE) {
    const body = paths && JSON.stringify({ paths: all.slice(at, at + TOLD_AT_ONCE) });
    await fetch(`/api/v1/nights/${nightId}/expected`, {
      method: 'DELETE',
      ...(body && { body, headers: { 'content-type': 'application/json' } }),
    });
  }
}
