import { problemAt } from '../place';

/** Spectra pack to a half or a tenth; only padding and bombs pack to less than this part. */
const MAX_RATIO = 200;
/** Below this size the ratio does not matter: a small file of blanks may pack to almost nothing. */
const RATIO_FROM_BYTES = 16 * 1024 * 1024;
/** No archive may unpack to more than this, whatever its ratio: some 100,000 spectra. */
const MAX_TOTAL_BYTES = 16 * 1024 ** 3;

/** Counts the bytes that really come out of packed ones, whatever their headers say, and stops a bomb. */
export class Expansion {
  private outBytes = 0;

  /**
   * @param packedBytes bytes that go in
   * @param file the archive, `member` the one of it that is counted, where not all is
   */
  constructor(
    private readonly packedBytes: number,
    private readonly file: string,
    private readonly member?: string,
  ) {}

  /** @throws InputProblem `archive-bomb` once too much has come out */
  count(bytes: number): void {
    this.outBytes += bytes;
    const tooMuch = this.outBytes > MAX_TOTAL_BYTES;
    const tooDense = this.outBytes > RATIO_FROM_BYTES && this.outBytes > MAX_RATIO * this.packedBytes;
    if (!tooMuch && !tooDense) return;
    const what = tooMuch
      ? `It unpacks to more than ${MAX_TOTAL_BYTES / 1024 ** 3} GiB.`
      : `It unpacks to more than ${MAX_RATIO} times its packed size.`;
    throw problemAt(
      { file: this.file, ...(this.member !== undefined && { detail: this.member }) },
      'archive-bomb',
      what,
      'Hand in its files unpacked, or in several archives.',
    );
  }
}
