import { CHUNKED_FROM_BYTES } from '$lib/domain/upload';

/**
 * checking: its digest is computed and the server asked; waiting: to be sent; sending: on its way; taken, already (the
 * night had these bytes), refused (with its reason): what the server said; cancelled: taken back before an answer came.
 */
export type EntryState = 'checking' | 'waiting' | 'sending' | 'taken' | 'already' | 'refused' | 'cancelled';

let made = 0;
/** Longest path that is announced; of a longer one its end. */
const PATH_LENGTH = 500;

/** One file of an upload and what became of it. */
export class UploadEntry {
  readonly id = ++made;
  readonly file: File;
  readonly path: string;
  readonly name: string;
  readonly sizeBytes: number;
  state = $state<EntryState>('waiting');
  what = $state('');
  mend = $state('');
  /** An archive: its members are taken by the server, one after another. */
  isArchive = $state(false);
  /** Bytes of it that are digested or sent, for files large enough to be watched. */
  doneBytes = $state(0);
  /** Goes in a request of its own: it is large, or its batch was refused as a whole. */
  alone: boolean;
  sha256: string | null = null;
  /** Answers that said nothing of it. */
  unnamed = 0;
  /** Stops the sending of this one alone; only large files have it. */
  abort: AbortController | null = null;

  constructor(file: File, path: string) {
    this.file = file;
    this.path = path;
    this.name = path.split('/').pop() || file.name;
    // Read once: the browser asks the disk at the first time, and answers slowly at every other.
    this.sizeBytes = file.size;
    this.alone = this.isLarge;
  }

  /** Goes up in chunks, and goes on where it was after a break. */
  get isLarge(): boolean {
    return this.sizeBytes >= CHUNKED_FROM_BYTES;
  }

  /** The name it is announced by. */
  get announcedPath(): string {
    return this.path.slice(-PATH_LENGTH);
  }

  /** True while taking it back still keeps it from being sent. */
  get canCancel(): boolean {
    return this.state === 'checking' || this.state === 'waiting' || (this.state === 'sending' && this.abort !== null);
  }

  refuse(what: string, mend: string): void {
    this.state = 'refused';
    this.what = what;
    this.mend = mend;
  }
}
