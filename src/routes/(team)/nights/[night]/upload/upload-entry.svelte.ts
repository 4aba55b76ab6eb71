/**
 * waiting: to be sent; sending: on its way; taken, already (the night had these bytes), refused (with its reason): what
 * the server said; cancelled: taken back before an answer came.
 */
export type EntryState = 'waiting' | 'sending' | 'taken' | 'already' | 'refused' | 'cancelled';

let made = 0;

/** One file of an upload and what became of it. */
export class UploadEntry {
  readonly id = ++made;
  readonly file: File;
  readonly path: string;
  readonly name: string;
  state = $state<EntryState>('waiting');
  what = $state('');
  mend = $state('');
  alone = false;

  constructor(file: File, path: string) {
    this.file = file;
    this.path = path;
    this.name = path.split('/').pop() || file.name;
  }

  get sizeBytes(): number {
    return this.file.size;
  }

  refuse(what: string, mend: string): void {
    this.state = 'refused';
    this.what = what;
    this.mend = mend;
  }
}
