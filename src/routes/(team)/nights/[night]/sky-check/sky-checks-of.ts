import type { NightMeasurement } from '$lib/domain/night';
import type { SkyCheck } from '$lib/science/derive/summarise-sky-check';
import { nameOf } from '../table/arrange-rows';

/** The sky-line check of every row that has one, in the order of the rows. */
export function skyChecksOf(rows: readonly NightMeasurement[]): SkyCheck[] {
  return rows.flatMap((row) => {
    const { spectrum: id, midExposure, skyOffsetKms: offsetKms, skyScatterKms } = row;
    if (offsetKms === null) return [];
    const timeMs = midExposure === null ? null : Date.parse(midExposure);
    return [{ id, name: nameOf(row), timeMs, offsetKms, scatterKms: skyScatterKms ?? 0 }];
  });
}
