import type { Medium } from '$lib/domain/spectrum';

/** Medium from the first four letters of a spectral coordinate type (FITS WCS Paper III, table 1), or null. */
export function mediumOfType(type: string | null): Medium | null {
  const quantity = type?.trim().toUpperCase().slice(0, 4) ?? '';
  if (quantity === 'AWAV') return 'air';
  return ['WAVE', 'FREQ', 'ENER', 'WAVN'].includes(quantity) ? 'vacuum' : null;
}

/** Medium from words: `wavelength in air`; null where neither or both media are named. */
export function mediumOfWords(text: string | null): Medium | null {
  if (!text) return null;
  const vacuum = /\b(in[ _-]?)?vac(uum)?\b/i.test(text.replaceAll('_', ' '));
  const air = /\bair\b/i.test(text.replaceAll('_', ' '));
  if (vacuum === air) return null;
  return vacuum ? 'vacuum' : 'air';
}

/** Medium from a column's name: `wave_air`, `lambda_vac`, `AWAV`. */
export function mediumOfName(name: string): Medium | null {
  if (/^awav$/i.test(name)) return 'air';
  if (/(^|[^a-z])air([^a-z]|$)/i.test(name) || /^(wave|wavelength|lambda)air$/i.test(name)) return 'air';
  if (/(^|[^a-z])vac(uum)?([^a-z]|$)/i.test(name) || /^(wave|wavelength|lambda)vac(uum)?$/i.test(name)) return 'vacuum';
  return null;
}

/** Medium from a UCD: `em.wl;obs.atmos` marks wavelengths in air; a bare `em.wl` leaves it open. */
export function mediumOfUcd(ucd: string | null): Medium | null {
  return ucd
    ?.toLowerCase()
    .split(';')
    .map((word) => word.trim())
    .includes('obs.atmos')
    ? 'air'
    : null;
}
