const pad = (value: number) => String(value).padStart(2, '0');

/** `05:42`, UTC. Accepts a Date, an ISO string or milliseconds since 1970; `not known` for null or an invalid time. */
export function timeUtc(moment: Date | string | number | null): string {
  const date = moment === null ? null : new Date(moment);
  if (!date || Number.isNaN(date.getTime())) return 'not known';
  return `${pad(date.getUTCHours())}:${pad(date.getUTCMinutes())}`;
}

/** `2026-11-14`, ISO 8601, UTC. */
export function dateUtc(moment: Date | string | number | null): string {
  const date = moment === null ? null : new Date(moment);
  if (!date || Number.isNaN(date.getTime())) return 'not known';
  return `${date.getUTCFullYear()}-${pad(date.getUTCMonth() + 1)}-${pad(date.getUTCDate())}`;
}

/** `2026-11-14 05:42 UTC`. */
export function dateTimeUtc(moment: Date | string | number | null): string {
  const date = dateUtc(moment);
  return date === 'not known' ? date : `${date} ${timeUtc(moment)} UTC`;
}

/** A length of time in seconds as `0:41` (min:s), `1:02:03` (h:min:s) from an hour on. */
export function durationText(seconds: number): string {
  if (!(seconds >= 0) || !Number.isFinite(seconds)) return 'not known';
  const whole = Math.round(seconds);
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor((whole % 3600) / 60);
  return hours > 0 ? `${hours}:${pad(minutes)}:${pad(whole % 60)}` : `${minutes}:${pad(whole % 60)}`;
}
