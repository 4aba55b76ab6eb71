import { Refusal } from '$lib/domain/refusal';
import { addToNight, storeBytes, type NightAdmitted, type ReceivedFile, type StoredBytes } from './receive-file';

/** Rows written together while more files arrive. */
const FILES_PER_TRANSACTION = 32;
/** Files made safe on the disk at once: each waits for it twice, and waiting together costs little more than alone. */
const BESIDE = 4;

export interface Upload {
  files: ReceivedFile[];
  /** Parts that were not taken, each with its reason; the others were. */
  refused: { name: string; what: string; mend: string }[];
  /** Archives whose bytes are here; their members follow as they are unpacked. */
  archives: { id: string; name: string }[];
}

/** Where the files of one request are put: to storage one by one, into the night a few at a time. */
export class Shelf {
  /** The first refusal, for an answer where nothing was taken. */
  first: Refusal | undefined;
  private stored: StoredBytes[] = [];
  private readonly beside = new Set<Promise<void>>();
  private fault: unknown;

  constructor(
    private readonly night: NightAdmitted,
    private readonly upload: Upload,
  ) {}

  async put(name: string, stream: AsyncIterable<Uint8Array>): Promise<void> {
    this.stored.push(await storeBytes({ name, stream }));
    if (this.stored.length >= FILES_PER_TRANSACTION) await this.settle();
  }

  /** Puts a small file while the next is read; returns as soon as there is room for that. */
  async putBeside(name: string, bytes: Uint8Array): Promise<void> {
    if (this.fault) throw this.fault;
    const putting = this.put(name, one(bytes))
      .catch((error: unknown) => this.refuse(name, error))
      .catch((error: unknown) => void (this.fault ??= error))
      .finally(() => this.beside.delete(putting));
    this.beside.add(putting);
    if (this.beside.size >= BESIDE) await Promise.race(this.beside);
  }

  /** Says why a file is not taken; anything but a refusal is thrown. */
  refuse(name: string, error: unknown): void {
    if (!(error instanceof Refusal)) throw error;
    this.first ??= error;
    this.upload.refused.push({ name, what: error.what, mend: error.mend });
  }

  /** Takes into the night what is stored; with nothing left beside, that is all. */
  async settle(): Promise<void> {
    const stored = this.stored;
    this.stored = [];
    this.upload.files.push(...(await addToNight(this.night, stored)));
  }

  /** Waits for what is beside, then settles. */
  async end(): Promise<void> {
    await Promise.all(this.beside);
    await this.settle();
    if (this.fault) throw this.fault;
  }
}

async function* one(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  if (bytes.length > 0) yield bytes;
}
