/** A number of bytes in decimal units, one decimal from a megabyte on: `812 kB`, `48.1 MB`. */
export function bytesText(bytes: number): string {
  if (bytes < 999.5) return `${Math.round(bytes)} B`;
  if (bytes < 999_500) return `${Math.round(bytes / 1e3)} kB`;
  if (bytes < 999.95e6) return `${(bytes / 1e6).toFixed(1)} MB`;
  return `${(bytes / 1e9).toFixed(1)} GB`;
}
