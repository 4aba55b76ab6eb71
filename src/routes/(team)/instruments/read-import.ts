import type { Instrument } from '$lib/domain/instrument';
import { Refusal } from '$lib/domain/refusal';
import { checkDescription } from './read-description';

/** A description is a few hundred bytes; with a thousand assignments some hundred thousand. */
const MAX_BYTES = 512 * 1024;

/** The description in the JSON file of a form, as `measure --instrument` takes it. */
export async function readImport(form: FormData): Promise<Instrument> {
  const file = form.get('file');
  if (!(file instanceof File) || file.size === 0) {
    throw new Refusal('invalid', 'No file was chosen.', 'Choose a description in JSON.', 'file');
  }
  if (file.size > MAX_BYTES) {
    throw new Refusal('too-large', `${file.name} is too large for a description.`, 'It is at most 512 kB.', 'file');
  }
  let value: unknown;
  try {
    value = JSON.parse(await file.text());
  } catch (error) {
    const why = error instanceof Error ? error.message : 'it cannot be read';
    throw new Refusal('invalid', `${file.name} is not JSON: ${why}.`, 'Export a description to see its form.', 'file');
  }
  return checkDescription(value);
}
