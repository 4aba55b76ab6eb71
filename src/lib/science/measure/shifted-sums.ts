/** A row of values added to a sum with an offset: `values[m + shift]` to element m, wherever both exist. */
export interface ShiftedRow {
  values: Float64Array;
  shift: number;
}

/**
 * Sums rows with offsets into `total`, which it overwrites: total[m] = sum over rows of values[m + shift], in the rows'
 * order.
 *
 * The elements are cut where a row begins or ends, so that the same rows act all over a piece; four rows are added at a
 * time, which spares three of four trips through `total`, and a piece stays in the processor's nearest cache.
 *
 * @param total one value an element; 0 where no row reaches
 */
export function sumShifted(rows: readonly ShiftedRow[], total: Float64Array): void {
  const length = total.length;
  const cuts = new Set([0, length]);
  for (const { values, shift } of rows) {
    for (const cut of [-shift, values.length - shift]) if (cut > 0 && cut < length) cuts.add(cut);
  }
  const ordered = [...cuts].sort((a, b) => a - b);
  total.fill(0);
  for (let c = 0; c + 1 < ordered.length; c++) {
    const from = ordered[c];
    const to = ordered[c + 1];
    const active = rows.filter(({ values, shift }) => -shift <= from && values.length - shift >= to);
    let r = 0;
    for (; r + 4 <= active.length; r += 4)
      addFour(total, active[r], active[r + 1], active[r + 2], active[r + 3], from, to);
    for (; r < active.length; r++) addOne(total, active[r], from, to);
  }
}

function addFour(
  total: Float64Array,
  first: ShiftedRow,
  second: ShiftedRow,
  third: ShiftedRow,
  fourth: ShiftedRow,
  from: number,
  to: number,
): void {
  const a = first.values;
  const b = second.values;
  const c = third.values;
  const d = fourth.values;
  let i = from + first.shift;
  let j = from + second.shift;
  let k = from + third.shift;
  let l = from + fourth.shift;
  // From left to right, as if one row were added after the other.
  for (let m = from; m < to; m++) total[m] = total[m] + a[i++] + b[j++] + c[k++] + d[l++];
}

function addOne(total: Float64Array, { values, shift }: ShiftedRow, from: number, to: number): void {
  for (let m = from; m < to; m++) total[m] += values[m + shift];
}
