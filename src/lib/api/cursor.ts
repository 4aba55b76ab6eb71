import { Refusal } from '$lib/domain/refusal';

/** A place in a list, opaque to clients: base64url of the JSON of the last row's sort keys. */
export function encodeCursor(keys: (string | number)[]): string {
  return btoa(JSON.stringify(keys)).replaceAll('+', '-').replaceAll('/', '_').replaceAll('=', '');
}

/** The sort keys of a cursor; a cursor that is none of ours is refused. */
export function decodeCursor(cursor: string, length: number): (string | number)[] {
  try {
    const keys: unknown = JSON.parse(atob(cursor.replaceAll('-', '+').replaceAll('_', '/')));
    if (Array.isArray(keys) && keys.length === length) return keys as (string | number)[];
  } catch {
    // told below
  }
  throw new Refusal('invalid', 'The cursor is not one that this list gave.', 'Start without a cursor.', 'cursor');
}
