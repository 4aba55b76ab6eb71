import { z } from 'zod';

/** What the server says of one request's files: each stands in one of the two lists, in the order it was sent. */
export const uploadAnswerSchema = z.object({
  files: z.array(z.object({ name: z.string(), already: z.boolean() })),
  refused: z.array(z.object({ name: z.string(), what: z.string(), mend: z.string() })),
  /** Archives, whose members follow as they are unpacked. */
  archives: z.array(z.object({ name: z.string() })).default([]),
});
export type UploadAnswer = z.infer<typeof uploadAnswerSchema>;

export type Outcome =
  | { state: 'taken' | 'already' | 'archive' }
  | { state: 'refused'; what: string; mend: string }
  /** The answer says nothing of the file: it may or may not have arrived. */
  | { state: 'unknown' };

/** What became of each file sent, in the order sent. Names are told apart as the server cleans them. */
export function matchAnswer(names: readonly string[], answer: UploadAnswer): Outcome[] {
  const taken = new Map(answer.files.map((file) => [file.name, file]));
  const archives = new Set(answer.archives.map((archive) => archive.name));
  const refused = new Map(answer.refused.map((file) => [cleaned(file.name), file]));
  return names.map((name): Outcome => {
    const no = refused.get(cleaned(name));
    if (no) return { state: 'refused', what: no.what, mend: no.mend };
    const yes = taken.get(cleaned(name));
    if (archives.has(cleaned(name))) return { state: 'archive' };
    return yes ? { state: yes.already ? 'already' : 'taken' } : { state: 'unknown' };
  });
}

/** The server leaves control characters out of a name and keeps its last 255 characters. */
function cleaned(name: string): string {
  return name.replace(/[\u0000-\u001f\u007f]/g, '').slice(-255) || 'unnamed';
}
