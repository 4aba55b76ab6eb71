/**
 * Id of the newest verdict on spectrum `s` that stands: not withdrawn, not superseded. For use inside a query.
 * Blindness is the use-case's to keep: it asks for this only where the reader may see others' verdicts.
 */
export const CURRENT_VERDICT = `(SELECT MAX(w.id) FROM verdicts w WHERE w.spectrum_id = s.id AND w.kind <> 'withdrawn'
  AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id))`;
