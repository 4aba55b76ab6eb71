import type { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';

/**
 * The fields of a form, parsed; throws a Refusal about the first field at fault, in a sentence for the person.
 * @param lists names of fields that may stand there several times
 */
export function parseForm<T extends z.ZodType>(schema: T, form: FormData, lists: readonly string[] = []): z.output<T> {
  const fields: Record<string, unknown> = {};
  for (const [name, value] of form) if (!lists.includes(name)) fields[name] = value;
  for (const name of lists) fields[name] = form.getAll(name);
  const result = schema.safeParse(fields);
  if (result.success) return result.data;
  const [{ message, path }] = result.error.issues;
  throw new Refusal('invalid', `${message[0].toUpperCase()}${message.slice(1)}.`, '', String(path[0] ?? ''));
}
