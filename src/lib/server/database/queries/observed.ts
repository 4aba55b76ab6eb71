/** For use inside a query with spectra as `s`: no newer reduction of its exposure has come. */
export const CURRENT_REDUCTION = `s.superseded_by IS NULL`;

/** As above: it was observed, so not one that the installation combined of others; no newer reduction has come. */
export const OBSERVED = `s.kind <> 'combination' AND ${CURRENT_REDUCTION}`;
