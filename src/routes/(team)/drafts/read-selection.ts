import { draftSelectionSchema, type DraftSelection } from '$lib/domain/release';
import { Refusal } from '$lib/domain/refusal';

/** One name a line; blank lines don't count. */
const lines = (value: FormDataEntryValue | null) =>
  String(value ?? '')
    .split('\n')
    .map((line) => line.trim())
    .filter(Boolean);

/**
 * The selection that a form states: `confidence` boxes, the `engineAlone` box, names to leave out one a line, and true
 * pairs one a line with a bar between the names.
 */
export function readSelection(form: FormData): DraftSelection {
  const leaveOut = lines(form.get('leaveOut'));
  const truePairs = lines(form.get('truePairs')).map((line) => line.split('|').map((name) => name.trim()));
  const wrong = truePairs.find((pair) => pair.length !== 2 || pair.some((name) => !name));
  if (wrong) {
    throw new Refusal('invalid', `"${wrong.join(' | ')}" is no pair.`, 'Write two names with | between.', 'truePairs');
  }
  const result = draftSelectionSchema.safeParse({
    confidence: form.getAll('confidence'),
    engineAlone: form.has('engineAlone'),
    ...(leaveOut.length && { leaveOut }),
    ...(truePairs.length && { truePairs }),
  });
  if (result.success) return result.data;
  const [{ path }] = result.error.issues;
  if (path[0] === 'confidence') {
    throw new Refusal('invalid', 'No confidence word is ticked.', 'Tick at least one that may enter.', 'confidence');
  }
  throw new Refusal('invalid', 'A name is longer than 200 letters.', 'Copy it from the list again.', String(path[0]));
}

/** The notes of a form, with line ends as we keep them; a browser sends CRLF. */
export function readNotes(form: FormData): string {
  const notes = String(form.get('notes') ?? '')
    .replaceAll('\r\n', '\n')
    .trim();
  if (notes.length <= 8000) return notes;
  throw new Refusal('invalid', `The notes have ${notes.length} characters.`, 'Shorten them to 8,000.', 'notes');
}
