/** For use inside a query with spectra as `s`: it is none of those with a known answer, which count nowhere but in review. */
export const NOT_PLANTED = `NOT EXISTS (SELECT 1 FROM planted_spectra pl WHERE pl.spectrum_id = s.id)`;
