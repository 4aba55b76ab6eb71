import { Rate } from '../rate';

/** How fast an upload goes, and when it will be over. */
export class UploadSpeed {
  bytesPerSecond = $state<number | null>(null);
  filesPerSecond = $state<number | null>(null);
  secondsLeft = $state<number | null>(null);
  private byteRate = new Rate();
  private fileRate = new Rate();

  /** Notes what has gone out by now; what was there already took no time on the line and is left out. */
  mark(sent: { bytes: number; files: number }, left: { bytes: number; files: number }): void {
    const now = performance.now();
    this.byteRate.mark(sent.bytes, now);
    this.fileRate.mark(sent.files, now);
    this.bytesPerSecond = this.byteRate.perSecond(now);
    this.filesPerSecond = this.fileRate.perSecond(now);
    // Large files wait for the line, many small ones for the server: the slower of the two says when it is over.
    const ends = [this.byteRate.secondsLeft(left.bytes, now), this.fileRate.secondsLeft(left.files, now)].filter(
      (seconds) => seconds !== null,
    );
    this.secondsLeft = ends.length > 0 ? Math.max(...ends) : null;
  }
}
