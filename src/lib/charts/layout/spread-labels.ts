/**
 * Places for labels in a row: order kept, at least `gap` apart, inside [low, high], and as near as can be (least squares)
 * to where they belong. Pool-adjacent-violators on the wanted places less their share of gaps.
 * `wanted` must be increasing. Where the row is too short for all of them they run past `low`; see chooseLabels.
 */
export function spreadLabels(wanted: readonly number[], gap: number, low: number, high: number): number[] {
  const blocks: { sum: number; count: number }[] = [];
  wanted.forEach((place, i) => {
    blocks.push({ sum: place - i * gap, count: 1 });
    while (blocks.length > 1 && mean(blocks[blocks.length - 2]) >= mean(blocks[blocks.length - 1])) {
      const last = blocks.pop();
      const before = blocks[blocks.length - 1];
      before.sum += last?.sum ?? 0;
      before.count += last?.count ?? 0;
    }
  });
  const places: number[] = [];
  for (const block of blocks) {
    for (let i = 0; i < block.count; i++) places.push(mean(block) + places.length * gap);
  }
  const last = places.length - 1;
  return places
    .map((place, i) => Math.max(place, low + i * gap))
    .map((place, i) => Math.min(place, high - (last - i) * gap));
}

const mean = (block: { sum: number; count: number }) => block.sum / block.count;

/**
 * Which labels are written when a row holds only `capacity` of them: the weightiest, in their own order.
 * Returns indices into `weights`, increasing.
 */
export function chooseLabels(weights: readonly number[], capacity: number): number[] {
  const all = weights.map((_, i) => i);
  if (all.length <= capacity) return all;
  return all
    .sort((a, b) => weights[b] - weights[a])
    .slice(0, Math.max(0, Math.floor(capacity)))
    .sort((a, b) => a - b);
}
