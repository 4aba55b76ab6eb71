/** 1, 2 and 5 of each decade between two positive ends; every decade alone where they are more than four. */
export function logarithmicTicks(from: number, to: number): number[] {
  if (!(from > 0) || !(to > from)) return [];
  const [first, last] = [Math.floor(Math.log10(from)), Math.ceil(Math.log10(to))];
  const digits = last - first > 4 ? [1] : [1, 2, 5];
  const ticks: number[] = [];
  for (let decade = first; decade <= last; decade++) {
    for (const digit of digits) ticks.push(Number(`${digit}e${decade}`));
  }
  return ticks.filter((tick) => tick >= from && tick <= to);
}
