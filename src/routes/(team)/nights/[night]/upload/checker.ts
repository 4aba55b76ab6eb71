import type { Announced } from '$lib/domain/upload';
import { announce, TOLD_AT_ONCE } from './announce';
import { makeHasher, type HashFile } from './hash/hash-files';
import type { UploadEntry } from './upload-entry.svelte';

/** Digests told together, and how long the first of them waits for others. */
const DIGESTS_TOLD = 200;
const TOLD_AFTER_MS = 250;

export type Verdict = { state: 'send' | 'already' } | { state: 'refused'; what: string; mend: string };
export type Announce = (nightId: string, files: Parameters<typeof announce>[1]) => Promise<Announced['files'] | null>;

/**
 * Finds out which files need to be sent: announces them all by name, so that the night knows what is to come, digests
 * them beside the page, and asks by digest which are there already.
 */
export class Checker {
  constructor(
    private readonly nightId: string,
    private readonly hash: HashFile = makeHasher(),
    private readonly tell: Announce = announce,
  ) {}

  /** Calls `settle` once for each entry that is still being checked, in about the order given. */
  async check(entries: readonly UploadEntry[], settle: (entry: UploadEntry, verdict: Verdict) => void): Promise<void> {
    const rest: UploadEntry[] = [];
    for (let at = 0; at < entries.length; at += TOLD_AT_ONCE) {
      const some = entries.slice(at, at + TOLD_AT_ONCE);
      const answers = await this.tell(
        this.nightId,
        some.map(({ announcedPath: path, sizeBytes }) => ({ path, sizeBytes })),
      );
      some.forEach((entry, i) => {
        const answer = answers?.[i];
        if (answer?.state === 'refused') settle(entry, answer);
        else rest.push(entry);
      });
    }
    await this.digest(rest, settle);
  }

  private async digest(entries: UploadEntry[], settle: (entry: UploadEntry, verdict: Verdict) => void): Promise<void> {
    let ready: UploadEntry[] = [];
    let timer: ReturnType<typeof setTimeout> | undefined;
    const asking: Promise<void>[] = [];
    const ask = () => {
      clearTimeout(timer);
      timer = undefined;
      const some = ready.filter(({ state }) => state === 'checking');
      ready = [];
      if (some.length > 0) asking.push(this.ask(some, settle));
    };
    await Promise.all(
      entries.map(async (entry) => {
        if (entry.state !== 'checking') return;
        const sha256 = entry.sha256 ?? (await this.hash(entry.file, (read) => (entry.doneBytes = read)));
        if (entry.state !== 'checking') return;
        if (sha256 === null) {
          settle(entry, {
            state: 'refused',
            what: 'The browser can no longer read this file.',
            mend: 'Drop it again.',
          });
          return;
        }
        entry.sha256 = sha256;
        ready.push(entry);
        if (ready.length >= DIGESTS_TOLD) ask();
        else timer ??= setTimeout(ask, TOLD_AFTER_MS);
      }),
    );
    ask();
    await Promise.all(asking);
  }

  private async ask(entries: UploadEntry[], settle: (entry: UploadEntry, verdict: Verdict) => void): Promise<void> {
    const answers = await this.tell(
      this.nightId,
      entries.map(({ announcedPath: path, sizeBytes, sha256 }) => ({ path, sizeBytes, sha256: sha256 ?? undefined })),
    );
    entries.forEach((entry, i) => {
      const answer = answers?.[i];
      if (answer?.state === 'refused') settle(entry, answer);
      else settle(entry, { state: answer?.state === 'here' ? 'already' : 'send' });
    });
  }
}
