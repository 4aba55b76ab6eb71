import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';

/** Parses a boundary value; throws a Refusal that names every field and what is wrong with it. */
export function parse<T extends z.ZodType>(schema: T, value: unknown, what: string): z.output<T> {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const faults = result.error.issues.map((issue) => `${issue.path.join('.') || 'value'}: ${issue.message}`);
  const where = result.error.issues[0]?.path.join('.') ?? '';
  throw new Refusal('invalid', `${what} is not valid: ${faults.join('; ')}.`, 'Correct it and send it again.', where);
}

/** The JSON body of a request, parsed; a body that is no JSON is refused with its own sentence. */
export async function parseBody<T extends z.ZodType>(request: Request, schema: T): Promise<z.output<T>> {
  let body: unknown;
  try {
    body = await request.json();
  } catch {
    throw new Refusal('invalid', 'The body is not JSON.', 'Send application/json in UTF-8.', 'body');
  }
  return parse(schema, body, 'The body');
}

/** The query string, parsed. */
export function parseQuery<T extends z.ZodType>(url: URL, schema: T): z.output<T> {
  return parse(schema, Object.fromEntries(url.searchParams), 'The query');
}
