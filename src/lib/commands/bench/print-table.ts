/** Columns of text set out under a heading, numbers as they come. */
export function layOutTable(header: readonly string[], rows: readonly (readonly string[])[]): string {
  const widths = header.map((title, i) => Math.max(title.length, ...rows.map((row) => row[i].length)));
  const line = (cells: readonly string[]) =>
    cells
      .map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i])))
      .join('  ')
      .trimEnd();
  return [line(header), widths.map((w) => '-'.repeat(w)).join('  '), ...rows.map(line)].join('\n');
}

/** A share as percent, or a dash for none. */
export function percent(hits: number, count: number): string {
  return count === 0 ? '-' : `${((100 * hits) / count).toFixed(count >= 1000 ? 2 : 1)} %`;
}

/** A number to a few digits, or a dash where there is none. */
export function short(value: number, digits = 3): string {
  return Number.isFinite(value) ? value.toFixed(digits) : '-';
}
