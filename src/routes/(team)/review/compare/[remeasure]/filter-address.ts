import type { ComparisonFilter } from '$lib/domain/comparison';

/** The address of the same page with a part of its filter changed: filters live there. Its place in the pages is lost. */
export function filterAddress(
  filter: ComparisonFilter,
  change: Partial<ComparisonFilter> = {},
  cursor?: string,
): string {
  const wanted = { ...filter, ...change, cursor };
  const kept = Object.entries(wanted).flatMap(([name, value]) => (value === undefined ? [] : [[name, String(value)]]));
  return kept.length > 0 ? `?${new URLSearchParams(kept)}` : '?';
}
